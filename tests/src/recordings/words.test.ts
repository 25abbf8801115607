import { mount, RouterLinkStub } from '@vue/test-utils';
import { describe, expect, it } from 'vitest';
import { MEASURING_STOPPED } from '@shared/domain/recording-status.ts';
import type { QualityFinding } from '@shared/contract/measurement.ts';
import { sharingSchema } from '@shared/contract/recordings.ts';
import type { Likeness } from '@shared/contract/recordings.ts';
import QualityList from '@/components/recordings/QualityList.vue';
import type { Recording } from '@shared/contract/recordings.ts';
import { downloadsOf } from '@/components/recordings/download.ts';
import { placeLinks, timeMarks } from '@/components/recordings/finding-places.ts';
import { likenessWords } from '@/components/recordings/likeness-words.ts';
import { fileFacts, provenanceFacts } from '@/components/recordings/file-facts.ts';
import { formatOfFile, rateAndLength } from '@/components/recordings/format-words.ts';
import {
  meaningOfSharing,
  sharingWords,
  wordsOfProcessing,
} from '@/components/recordings/recording-words.ts';
import { format, recording } from './recording-fixture.ts';

function plain(text: string): string {
  return text.replace(/[\u00A0\u202F]/g, ' ');
}

describe('a recording in words', () => {
  it('is told by format, rate and length', () => {
    expect(plain(formatOfFile(format))).toBe('WAV, 16-bit integer, 1 channel');
    expect(plain(formatOfFile({ ...format, container: 'RF64', channels: 2 }))).toBe(
      'WAV (RF64), 16-bit integer, 2 channels',
    );
  });

  it('has its rate and length as they were in life', () => {
    const { rate, length } = rateAndLength({ sampleRateHz: 44_100, frames: 441_000 }, 10);
    expect(plain(rate)).toBe('441 000 Hz');
    expect(plain(length)).toBe('1 s');
  });

  it('has every state of sharing in words, and explains the ones that need it', () => {
    for (const sharing of sharingSchema.options) expect(sharingWords[sharing].value).not.toBe('');
    expect(meaningOfSharing('shared')).toBeNull();
    expect(meaningOfSharing('held')?.sentence).toContain('a reviewer who did not bring it in');
  });

  it('tells the progress of its measurement', () => {
    expect(wordsOfProcessing({ processing: 'failed', progress: 0, failure: MEASURING_STOPPED })).toEqual({
      value: 'measuring stopped',
      tone: 'plain',
    });
    expect(plain(wordsOfProcessing({ processing: 'measuring', progress: 0.4 }).value)).toBe(
      'being measured, 40 %',
    );
  });

  it('has facts with units, and unknown where nothing was told', () => {
    const facts = fileFacts(recording({ fullScaleV: null }));
    const byKey = new Map(facts.map(({ key, value }) => [key, plain(value)]));
    expect(byKey.get('rate')).toBe('1 000 000 Hz');
    expect(byKey.get('length')).toBe('86.4 s, 172.8 MB');
    expect(byKey.get('chain')).toBe('full scale unknown, preamplifier 40 dB');
    expect(byKey.get('band')).toBe('1 kHz to 400 kHz');
    expect(byKey.has('expansion')).toBe(false);
  });

  it('says what was declared as sensitive', () => {
    const facts = provenanceFacts(recording({ sensitivity: ['voices'] }));
    expect(facts.find(({ key }) => key === 'sensitivity')).toMatchObject({
      value: 'people may be heard',
      isGlowing: true,
    });
  });
});

describe('the downloads', () => {
  const addressOf = (kind: string, channel?: number) =>
    channel === undefined ? `/address/${kind}` : `/address/${kind}/${channel}`;
  const linksOf = (part: Partial<Recording>) =>
    downloadsOf(recording(part), addressOf).flatMap(({ links }) => links);

  it('hold what was recorded and what was measured', () => {
    expect(linksOf({}).map(({ href }) => href)).toEqual([
      '/address/audio',
      '/address/frames.csv/0',
      '/address/spectrum/0',
      '/address/candidates.csv',
      '/address/candidates.jsonl',
    ]);
  });

  it('name the file as what it came in as', () => {
    const [wav] = downloadsOf(recording(), addressOf);
    expect(wav?.detail).toMatch(/^WAV, /);
    const flac = { ...format, container: 'FLAC' as const };
    expect(downloadsOf(recording({ format: flac }), addressOf)[0]?.detail).toMatch(/^FLAC, /);
  });

  it('hold descriptors and spectra of every channel, under names that tell them apart', () => {
    const files = linksOf({ channels: 3 }).filter(({ href }) => href.includes('frames'));
    expect(files.map(({ label }) => label)).toEqual(['channel 0', 'channel 1', 'channel 2']);
    expect(files[2]).toMatchObject({
      href: '/address/frames.csv/2',
      fileName: 'film-07.wav.channel-2.frames.csv',
    });
  });

  it('hold no candidates and no course for whoever works blind', () => {
    const hrefs = linksOf({ blind: true }).map(({ href }) => href);
    expect(hrefs.filter((href) => /candidates|frames/.test(href))).toEqual([]);
  });

  it('hold only the original until it is measured', () => {
    expect(downloadsOf(recording({ processing: 'queued' }), addressOf)).toHaveLength(1);
  });
});

describe('the list of quality findings', () => {
  it('puts the weightiest first, by shape and word, and names the place', () => {
    const place = { channel: 0, startSample: 65_000_000, endSample: 65_000_010 };
    const wrapper = mount(QualityList, {
      props: {
        recording: recording(),
        findings: [
          { code: 'mains', weight: 'note', sentence: 'Mains lines.', count: 1, places: [] },
          { code: 'dropout', weight: 'serious', sentence: 'Samples were lost.', count: 1, places: [place] },
        ],
      },
      global: { stubs: { RouterLink: RouterLinkStub } },
    });
    expect(wrapper.getComponent(RouterLinkStub).props('to')).toEqual({
      path: `/bench/${recording().id}`,
      query: { from: '64950000', to: '65050010' },
    });
    const [first, second] = wrapper.findAll('.list > li').map((item) => item.text());
    expect(first).toContain('Serious: Samples were lost.');
    expect(first).toContain('at 1:05');
    expect(second).toContain('Note: Mains lines.');
  });

  it('says so where nothing stands out', () => {
    const wrapper = mount(QualityList, { props: { recording: recording(), findings: [] } });
    expect(wrapper.text()).toBe('Nothing stands out.');
  });
});

describe('the places of findings', () => {
  const facts = recording({ channels: 2, frames: 10_000, sampleRateHz: 1000 });
  const finding = (code: QualityFinding['code'], weight: QualityFinding['weight'], places: number[][]) => ({
    ...{ code, weight, sentence: 'Said in full.', count: places.length },
    places: places.map(([channel = 0, startSample = 0, endSample = 0]) => ({
      channel,
      startSample,
      endSample,
    })),
  });

  it('lead to the bench with room about them, each under a name of its own', () => {
    const links = placeLinks(
      finding('speech', 'caution', [
        [1, 2000, 4000],
        [0, 9990, 9995],
        [0, 9991, 9999],
      ]),
      facts,
    );
    expect(links.map(({ to }) => to.query)).toEqual([
      { from: '0', to: '6000' },
      { from: '9940', to: '10000' },
      { from: '9941', to: '10000' },
    ]);
    expect(links[0]!.name).toContain('channel 1');
    expect(new Set(links.map(({ name }) => name)).size).toBe(3);
  });

  it('are none for the whole recording, and marks on the axis of time for more than notes', () => {
    const whole = finding('channel-silent', 'caution', [[0, 0, 10_000]]);
    const noted = finding('mains', 'note', [[0, 100, 200]]);
    expect(placeLinks(whole, facts)).toEqual([]);
    expect(timeMarks([whole, noted, finding('dropout', 'serious', [[0, 500, 1500]])], facts)).toEqual([
      { fromS: 0.5, toS: 1.5 },
    ]);
  });
});

describe('a likeness in words', () => {
  const likeness = (part: Partial<Likeness>): Likeness => ({
    ...{ kind: 'similar', recordingId: recording().id, fileName: 'copy.wav', labName: 'Northlight' },
    ...{ channel: 0, otherChannel: 0, offsetS: 0, ...part },
  });

  it.each<[Partial<Likeness>, number, string]>([
    [{ kind: 'same-file' }, 1, 'The very same file.'],
    [{ kind: 'same-samples' }, 1, 'The same samples in another file.'],
    [
      { kind: 'same-samples', otherChannel: 1 },
      1,
      'The same samples in another file (channel 0, there channel 1).',
    ],
    [{ offsetS: 0.1 }, 1, 'Sounds like a copy, or like a part of one.'],
    [{ offsetS: 5 }, 1, 'Sounds like a copy, or like a part of one; it begins 5 s into the other.'],
    [{ offsetS: -61 }, 1, 'Sounds like a copy, or like a part of one; the other begins 61 s into it.'],
  ])('says of %o what it is', (part, channels, words) => {
    expect(plain(likenessWords(likeness(part), channels))).toBe(words);
  });
});
