import { beforeEach, describe, expect, it, vi } from 'vitest';
import type { CandidateOverview } from '@shared/contract/candidates.ts';
import { getCandidateOverview, listCandidatePage } from '@/api/candidates.ts';
import { drawDensity } from '@/components/bench/density-drawing.ts';
import { placeStage } from '@/composables/bench/stage-places.ts';
import { loadInView } from '@/composables/bench/useCandidates.ts';
import { palettes } from '@/theme/palette.ts';
import { candidate } from '../recordings/recording-fixture.ts';

vi.mock('@/api/candidates.ts', () => ({ listCandidatePage: vi.fn(), getCandidateOverview: vi.fn() }));

const span = { startSample: 1000, endSample: 2000 };
const overview: CandidateOverview = {
  total: 900,
  classes: { below: 300, across: 0, above: 600, unknown: 0 },
  ...span,
  samplesPerStep: 500,
  steps: { below: [100, 200], across: [0, 0], above: [600, 0], unknown: [0, 0] },
};

function answer(count: number) {
  const page = {
    items: [candidate()],
    firstRank: 0,
    nextCursor: null,
    total: { count, capped: false as const },
  };
  vi.mocked(listCandidatePage).mockResolvedValue(page);
  vi.mocked(getCandidateOverview).mockResolvedValue(overview);
}

describe('candidates of the part that is shown', () => {
  const { signal } = new AbortController();
  beforeEach(() => vi.resetAllMocks());

  it('come one by one as long as they can be told apart, and nothing else is asked for', async () => {
    answer(500);
    const shown = await loadInView('r', span, signal);
    expect(shown).toMatchObject({ total: 500, candidates: [{ ordinal: 0 }], density: null });
    expect(getCandidateOverview).not.toHaveBeenCalled();
  });

  it('come as counts over the same part where they are too many', async () => {
    answer(501);
    const shown = await loadInView('r', span, signal);
    expect(shown).toEqual({ total: 501, candidates: [], density: overview });
    expect(vi.mocked(getCandidateOverview).mock.calls[0]?.[1]).toMatchObject(span);
  });
});

describe('the counts over the picture', () => {
  it('stand in the lane of glyphs, each over its time and as high as its share of the greatest', () => {
    const columns: number[][] = [];
    const context = {
      save: () => undefined,
      restore: () => undefined,
      beginPath: () => undefined,
      rect: () => undefined,
      clip: () => undefined,
      fillText: () => undefined,
      fillRect: (...box: number[]) => columns.push(box),
    };
    const places = placeStage({ widthPx: 1066, heightPx: 500, split: 0.5, topHz: 96_000 });
    drawDensity(
      {
        context: context as unknown as CanvasRenderingContext2D,
        places,
        window: span,
        colours: palettes.light,
      },
      overview,
    );
    const lane = places.glyphHeightPx;
    expect(columns.map(([left, , width]) => [left, width])).toEqual([
      [66, 500],
      [566, 500],
    ]);
    const heights = columns.map(([, , , height]) => height ?? 0);
    expect(heights[1]! / heights[0]!).toBeCloseTo(200 / 700);
    for (const [, top = 0, , height = 0] of columns) expect(top + height).toBeCloseTo(lane);
    expect(Math.max(...heights)).toBeLessThan(lane);
  });
});
