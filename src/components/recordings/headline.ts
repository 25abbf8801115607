import type { Recording, ToldMeasurement, ToldUltrasound } from '@shared/contract/recordings.ts';
import { MEASURING_STOPPED } from '@shared/domain/recording-status.ts';
import { formatBand } from '@/components/sensors/sensor-words.ts';
import { formatCount, formatNumber, formatShare } from '@/composables/useFormat.ts';

export type HeadlineFacts = Pick<
  Recording,
  'processing' | 'progress' | 'failure' | 'blind' | 'isSoundWithheld' | 'measurement' | 'eventCount'
>;

export interface Headline {
  title: string;
  /** What the sentence begins with, in the warm light; empty where nothing deserves it. */
  key: string;
  sentence: string;
}

/** Nearly all, most: words for a share that do not promise more digits than a candidate has. */
const nearlyAll = 0.9;
const most = 0.5;

function chanceWords(expected: number): string {
  if (expected < 0.5) return 'fewer than one';
  return `about ${formatNumber(expected, { maximumSignificantDigits: 2 })}`;
}

function whereTheyLie({ total, above, across, below }: ToldUltrasound['candidates']): string {
  // As with a sensor whose band begins at the line or above it.
  if (above + across + below === 0) return 'where they lie to the hearing line cannot be told';
  if (above + across === 0) return total === 1 ? 'not above the hearing line' : 'none above the hearing line';
  if (above === total) return total === 1 ? 'above the hearing line' : 'all above the hearing line';
  if (above >= nearlyAll * total) return 'nearly all above the hearing line';
  if (above >= most * total) return 'most above the hearing line';
  return `${formatNumber(above + across)} of them above or across the hearing line`;
}

function confirmedWords(eventCount: number | null, total: number): string {
  if (eventCount === null) return '';
  if (eventCount > 0)
    return ` ${formatCount(eventCount, 'mark has', 'marks have')} been set by people so far.`;
  return total === 1 ? ' It is not confirmed yet.' : ' None is confirmed yet.';
}

/** Nothing rose above the last bit on any channel. */
function isSilent({ levels }: ToldMeasurement): boolean {
  return levels.length > 0 && levels.every(({ rmsDb }) => rmsDb === null);
}

function ofUnobservable({ reason, candidates }: ToldUltrasound, eventCount: number | null): Headline {
  const { total } = candidates;
  const title =
    total === 0
      ? 'Ultrasound cannot be observed in this file'
      : `${formatCount(total, 'candidate')}, ultrasound cannot be observed`;
  return {
    title,
    key: reason,
    sentence: total === 0 ? ' No candidate was found below it either.' : confirmedWords(eventCount, total),
  };
}

function ofNotFound({ reason, candidates }: ToldUltrasound, eventCount: number | null): Headline {
  const { total } = candidates;
  const title =
    total === 0
      ? 'Nothing found above the hearing line'
      : `${formatCount(total, 'candidate')}, no ultrasound found`;
  return { title, key: '', sentence: `${reason}${total > 0 ? confirmedWords(eventCount, total) : ''}` };
}

function ofFound(ultrasonic: ToldUltrasound, eventCount: number | null): Headline {
  const { candidates, bandLowHz, bandHighHz, burstEnergyShare, spanCount } = ultrasonic;
  const asSeen = `as this sensor sees it (${formatBand(bandLowHz, bandHighHz)})`;
  if (candidates.total === 0) {
    return {
      title: 'Energy above the hearing line, no single burst',
      key: `${formatCount(spanCount, 'span')} above 20\u00A0kHz stand at least 6\u00A0dB over the quiet floor`,
      sentence: `, ${asSeen}. No single burst could be told apart in them.`,
    };
  }
  const share =
    burstEnergyShare === null
      ? 'Bursts have energy above 20\u00A0kHz'
      : `${formatShare(burstEnergyShare)} of the energy of the bursts lies above 20\u00A0kHz`;
  const chance = ` Noise alone would give ${chanceWords(candidates.expectedByChance)} with energy there.`;
  return {
    title: `${formatCount(candidates.total, 'candidate')}, ${whereTheyLie(candidates)}`,
    key: share,
    sentence: `, ${asSeen}.${confirmedWords(eventCount, candidates.total)}${chance}`,
  };
}

const blindHeadline: Headline = {
  title: 'You work blind on this recording',
  key: '',
  sentence:
    'Candidates, their counts and the ultrasonic course are withheld until your pass is finished, so that your marks are your own.',
};

const silentHeadline: Headline = {
  title: 'You mark the growth phases of this run without its sound',
  key: '',
  sentence:
    'The sound, and everything measured on it, is kept back until your pass is finished, so that the phases come from camera and temperature alone.',
};

function ofMeasured(measurement: ToldMeasurement, { blind, eventCount }: HeadlineFacts): Headline {
  const { ultrasonic } = measurement;
  if (isSilent(measurement)) {
    const sentence =
      'Nothing rises above its last bit on any channel: the sensor or its cable gave no signal.';
    return { title: 'This file is silent', key: '', sentence };
  }
  if (blind) return blindHeadline;
  if (ultrasonic.verdict === 'not-observable') return ofUnobservable(ultrasonic, eventCount);
  return ultrasonic.verdict === 'found'
    ? ofFound(ultrasonic, eventCount)
    : ofNotFound(ultrasonic, eventCount);
}

/** Headline of a recording's page, and a sentence that says no more than was measured. */
export function headlineOf(facts: HeadlineFacts): Headline {
  const { processing, failure, measurement } = facts;
  if (processing === 'queued') {
    const sentence = 'The file is stored whole. Its measurement starts by itself and appears here.';
    return { title: 'Waits to be measured', key: '', sentence };
  }
  if (processing === 'measuring') {
    const sentence = 'The page turns into the measurements when they are there; nothing has to be reloaded.';
    return { title: 'Is being measured', key: '', sentence };
  }
  if (failure === MEASURING_STOPPED) {
    const sentence =
      'What is finished is kept: measuring again goes on from there. The file itself is stored unchanged.';
    return { title: 'Measuring was stopped', key: '', sentence };
  }
  if (processing === 'failed') {
    const sentence = ' The file itself is stored unchanged; the measurement can be tried again.';
    return { title: 'The measurement failed', key: failure ?? 'No reason was kept.', sentence };
  }
  if (facts.isSoundWithheld) return silentHeadline;
  if (measurement === null) {
    const sentence = 'Its measurements are withheld from you.';
    return { title: 'Measured', key: '', sentence };
  }
  return ofMeasured(measurement, facts);
}
