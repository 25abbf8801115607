import { describe, expect, it } from 'vitest';
import { MEASURING_STOPPED } from '@shared/domain/recording-status.ts';
import { headlineOf } from '@/components/recordings/headline.ts';
import type { Headline } from '@/components/recordings/headline.ts';
import { measurement, recording, ultrasound } from './recording-fixture.ts';

function plain({ title, key, sentence }: Headline): { title: string; text: string } {
  const spaced = (text: string) => text.replace(/[\u00A0\u202F]/g, ' ');
  return { title: spaced(title), text: spaced(`${key}${sentence}`) };
}

function ofUltrasound(part: Parameters<typeof ultrasound>[0], eventCount: number | null = 0) {
  return plain(headlineOf(recording({ measurement: measurement(ultrasound(part)), eventCount })));
}

describe('the headline of a recording', () => {
  it('claims no more than candidates, as this sensor sees it, with the count of chance beside', () => {
    const { title, text } = plain(headlineOf(recording()));
    expect(title).toBe('214 candidates, nearly all above the hearing line');
    expect(text).toBe(
      '98 % of the energy of the bursts lies above 20 kHz, as this sensor sees it (1 kHz to 400 kHz). None is confirmed yet. Noise alone would give about 1.6 with energy there.',
    );
  });

  it.each([
    [{ total: 4, below: 0, across: 0, above: 4 }, '4 candidates, all above the hearing line'],
    [{ total: 1, below: 0, across: 0, above: 1 }, '1 candidate, above the hearing line'],
    [{ total: 10, below: 4, across: 0, above: 6 }, '10 candidates, most above the hearing line'],
    [
      { total: 15, below: 14, across: 1, above: 0 },
      '15 candidates, 1 of them above or across the hearing line',
    ],
    [{ total: 9, below: 9, across: 0, above: 0 }, '9 candidates, none above the hearing line'],
    [
      { total: 9, below: 0, across: 0, above: 0 },
      '9 candidates, where they lie to the hearing line cannot be told',
    ],
  ])('says where %o lie', (counts, title) => {
    expect(ofUltrasound({ candidates: { ...counts, expectedByChance: 0 } }).title).toBe(title);
  });

  it('never calls candidates bursts that were confirmed, cracks or events', () => {
    const { title, text } = plain(headlineOf(recording()));
    expect(`${title} ${text}`).not.toMatch(/crack|event/i);
  });

  it('tells of marks once people have set some, and of none to whom they are withheld', () => {
    expect(ofUltrasound({}, 60).text).toContain('60 marks have been set by people so far.');
    expect(ofUltrasound({}, null).text).not.toMatch(/confirmed|marks/);
  });

  it('puts the reason first where ultrasound cannot be observed', () => {
    const reason = 'The sample rate ends at 24 kHz.';
    const candidates = { total: 37, below: 0, across: 0, above: 0, expectedByChance: 0 };
    const { title, text } = ofUltrasound({ verdict: 'not-observable', reason, candidates });
    expect(title).toBe('37 candidates, ultrasound cannot be observed');
    expect(text).toBe(`${reason} None is confirmed yet.`);
    const none = { ...candidates, total: 0 };
    expect(ofUltrasound({ verdict: 'not-observable', reason, candidates: none }).title).toBe(
      'Ultrasound cannot be observed in this file',
    );
  });

  it('says that it was looked for where nothing was found', () => {
    const reason = 'Looked for and not found.';
    const candidates = { total: 0, below: 0, across: 0, above: 0, expectedByChance: 0 };
    const { title, text } = ofUltrasound({ verdict: 'not-found', reason, candidates });
    expect(title).toBe('Nothing found above the hearing line');
    expect(text).toBe(reason);
  });

  it('tells energy without a single burst from bursts', () => {
    const candidates = { total: 0, below: 0, across: 0, above: 0, expectedByChance: 0 };
    const { title, text } = ofUltrasound({ candidates, burstEnergyShare: null });
    expect(title).toBe('Energy above the hearing line, no single burst');
    expect(text).toContain('as this sensor sees it');
  });

  it('calls a silent file silent, whatever else was computed', () => {
    const silent = measurement(ultrasound({ verdict: 'not-found' }), null);
    expect(headlineOf(recording({ measurement: silent })).title).toBe('This file is silent');
  });

  it('withholds figures from whoever works blind, and says why', () => {
    const { title, text } = plain(headlineOf(recording({ blind: true, eventCount: null })));
    expect(title).toBe('You work blind on this recording');
    expect(text).toContain('withheld until your pass is finished');
    expect(`${title} ${text}`).not.toMatch(/\d/);
  });

  it('speaks of the state while nothing is measured', () => {
    const nothing = { measurement: null, candidateCount: null, eventCount: null };
    expect(headlineOf(recording({ processing: 'queued', ...nothing })).title).toBe('Waits to be measured');
    expect(headlineOf(recording({ processing: 'measuring', ...nothing })).title).toBe('Is being measured');
    const failed = headlineOf(recording({ processing: 'failed', failure: 'Out of memory.', ...nothing }));
    expect(failed.title).toBe('The measurement failed');
    expect(failed.key).toBe('Out of memory.');
    const stopped = headlineOf(recording({ processing: 'failed', failure: MEASURING_STOPPED, ...nothing }));
    expect(stopped).toMatchObject({ title: 'Measuring was stopped', key: '' });
    expect(stopped.sentence).toContain('goes on from there');
  });
});
