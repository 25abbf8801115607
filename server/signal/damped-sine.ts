import type { SourceSignal } from './band-energy.ts';
import { DIFFERENCE_REACH } from './differenced-spectrum.ts';
import { SineEdge } from './sine-edge.ts';
import { planWindow, SHORTEST_WINDOW, TWO_BANDS, WINDOW_KINDS, type WindowPlan } from './sine-windows.ts';
import { type FittedWindow, MOST_SHRINKING, SpectrumFit } from './spectrum-fit.ts';

/** A damped sine found in noise: exp(-t / decayS) sin(2 pi f t + phase) from its onset on. */
export interface DampedSine {
  /** Sample of the input, with a fraction. */
  readonly onsetSample: number;
  readonly onsetSpreadSamples: number;
  readonly frequencyHz: number;
  readonly decayS: number;
  /** Twice the log-likelihood ratio against noise alone: chi-square with 2 degrees in noise, at one place. */
  readonly statistic: number;
}

/** Where a test of energies says that something may have begun. */
export interface Spot {
  readonly kind: number;
  readonly lowHz: number;
  readonly highHz: number;
  /** Begin of the earliest and of the latest window that fired, in samples of the input that has not been delayed by filters. */
  readonly firstSample: number;
  readonly lastSample: number;
}

/** A sine of which the grid alone is known, in samples of the input. */
export interface CoarseSine {
  /** Where it begins. */
  readonly fromSample: number;
  readonly toSample: number;
  /** At least what the fitted sine's may be. */
  readonly evidence: number;
  /** At most what the fitted sine's may be. */
  readonly decaySamples: number;
}

export interface SineDemand {
  readonly leastStatistic: number;
  /** Share of the statistic that what was there before may have. */
  readonly mostBefore?: number;
  /** Whether the grid is enough for such a sine. */
  readonly isEnough?: (sine: CoarseSine) => boolean;
}

/** What the coarse grid may lose of the statistic. */
const COARSE_SHARE = 0.65;
/** What the first round of steps must reach of it. */
const HOPEFUL_SHARE = 0.85;
/** Highest frequency in units of W that is read at four times W. */
const HIGHEST_NARROW = 1.75;
const LEVELS_PER_WIDTH = 16;
const HIGHEST_LEVEL = 4 * LEVELS_PER_WIDTH;

/** A source, and the kinds of windows in its samples. */
interface View {
  readonly source: SourceSignal;
  readonly rateHz: number;
  readonly plans: readonly WindowPlan[];
  readonly fit: SpectrumFit;
}

/** One octave's search for damped sines of unknown onset, frequency, decay and phase in noise of known spectrum. */
export class DampedSineSearch {
  readonly #widthHz: number;
  readonly #wide: View;
  readonly #narrow: View;
  readonly #inverseLevels = new Float64Array(HIGHEST_LEVEL + 1);
  readonly #edge: SineEdge;

  /**
   * @param sources a wide one in which the octave lies well inside, and a narrow one at half its rate, or the same, where there is such.
   * @param widthHz W: the octave goes from W to 2 W.
   */
  constructor(sources: { wide: SourceSignal; narrow: SourceSignal }, widthHz: number, sampleRateHz: number) {
    this.#widthHz = widthHz;
    const view = (source: SourceSignal): View => {
      const rateHz = sampleRateHz / source.decimation;
      const plans = WINDOW_KINDS.map((kind) => planWindow(kind, rateHz / widthHz));
      return { source, rateHz, plans, fit: new SpectrumFit(rateHz) };
    };
    this.#wide = view(sources.wide);
    this.#narrow = view(sources.narrow);
    this.#edge = new SineEdge(sources.wide, this.#wide.rateHz, widthHz, widthHz / LEVELS_PER_WIDTH);
  }

  /** @param levelAt noise power at a frequency, in units of what white noise has there; 0 where nothing is to be looked for. */
  setNoise(levelAt: (frequencyHz: number) => number): void {
    for (let k = 0; k <= HIGHEST_LEVEL; k++) {
      const level = levelAt((k * this.#widthHz) / LEVELS_PER_WIDTH);
      this.#inverseLevels[k] = level > 0 ? 1 / level : 0;
    }
  }

  /** The spot about the best window of an active region; `null` where the window is too wide for its length. */
  spotAbout(region: {
    bestStartSample: number;
    bestEndSample: number;
    lowHz: number;
    highHz: number;
  }): Spot | null {
    const { bestStartSample: firstSample, bestEndSample, lowHz, highHz } = region;
    const { source, rateHz, plans } = this.#wide;
    const units = ((bestEndSample - firstSample) * this.#widthHz) / (rateHz * source.decimation);
    const kind = Math.max(
      0,
      Math.min(WINDOW_KINDS.length - 1, Math.round(Math.log2(units / SHORTEST_WINDOW))),
    );
    const plan = plans[kind];
    if (!plan) return null;
    const { margin, skirt, points } = plan.kind;
    const widthHz = highHz - lowHz + 2 * (margin + skirt) * this.#widthHz;
    if ((widthHz * plan.size) / rateHz > points) return null;
    return { kind, lowHz, highHz, firstSample, lastSample: firstSample };
  }

  /** Samples of the input that `search` reads about a spot: [first, end). */
  reachOf(spot: Spot): readonly [number, number] {
    const { view, plan, first } = this.#windowOf(spot);
    const { decimation } = view.source;
    return [(first - DIFFERENCE_REACH) * decimation, (first + plan.size + DIFFERENCE_REACH) * decimation];
  }

  /**
   * The likeliest damped sine about a spot, or `null` where none reaches the least statistic.
   *
   * The spectrum of the window, divided by the noise's, is brought down to a few points; a one-pole filter run backwards gives for each
   * frequency and decay the correlation with a damped sine from each point on, whose square over its mean in noise is
   * the generalised likelihood ratio for unknown amplitude and phase. The best of the grid is then refined by steps.
   *
   * Source: H. L. Van Trees, Detection, Estimation, and Modulation Theory I (1968), 4.4 (unknown phase).
   */
  search(spot: Spot, { leastStatistic, mostBefore = Infinity, isEnough }: SineDemand): DampedSine | null {
    const { view, plan, first } = this.#windowOf(spot);
    const { source, fit } = view;
    if (first - DIFFERENCE_REACH < source.start || first + plan.size + DIFFERENCE_REACH > source.end)
      return null;
    const width = this.#widthHz;
    const lowHz = spot.lowHz - plan.kind.margin * width;
    const highHz = spot.highHz + plan.kind.margin * width;
    fit.load(source, first, plan, {
      lowHz,
      highHz,
      skirtHz: plan.kind.skirt * width,
      inverseLevels: this.#inverseLevels,
      levelStepHz: width / LEVELS_PER_WIDTH,
    });
    const earliest = spot.firstSample / source.decimation + plan.onset[0] - first;
    const latest = spot.lastSample / source.decimation + plan.onset[1] - first;
    const coarse = fit.scan({ lowHz, highHz, earliest, latest, decay: plan.decay });
    if (coarse.statistic < COARSE_SHARE * leastStatistic) return null;
    const isBeforeLittle = (sine: FittedWindow) => fit.statisticAt(sine, -1) < mostBefore * sine.statistic;
    const rough = this.#roughly(view, first, coarse, plan);
    if (isEnough?.(rough.grid))
      return coarse.statistic >= leastStatistic && isBeforeLittle(coarse) ? rough.sine : null;
    const best = fit.refine(coarse, HOPEFUL_SHARE * leastStatistic);
    if (best.statistic < leastStatistic || best.onset <= earliest || best.onset >= latest) return null;
    return isBeforeLittle(best) ? this.#describe(view, first, best) : null;
  }

  #roughly({ source, rateHz }: View, first: number, coarse: FittedWindow, { size, kind }: WindowPlan) {
    const { frequencyHz, decay, statistic } = coarse;
    const onsetSample = source.inputSample(first + coarse.onset, frequencyHz);
    const onsetSpreadSamples = (size / kind.points) * source.decimation;
    return {
      grid: {
        fromSample: onsetSample - onsetSpreadSamples,
        toSample: onsetSample + onsetSpreadSamples,
        evidence: statistic / COARSE_SHARE / 2,
        decaySamples: (decay * source.decimation) / MOST_SHRINKING,
      },
      sine: { onsetSample, onsetSpreadSamples, frequencyHz, decayS: decay / rateHz, statistic },
    };
  }

  #describe({ source, rateHz }: View, first: number, best: FittedWindow): DampedSine {
    const { frequencyHz, statistic } = best;
    const decayS = best.decay / rateHz;
    const wide = this.#wide;
    const rough = {
      onset: wide.source.sourcePlace(source.inputSample(first + best.onset, frequencyHz), frequencyHz),
      frequencyHz,
      decay: decayS * wide.rateHz,
    };
    const { onset, spread } = this.#edge.place(rough, statistic, this.#inverseLevels);
    return {
      onsetSample: wide.source.inputSample(onset, frequencyHz),
      onsetSpreadSamples: spread * wide.source.decimation,
      frequencyHz,
      decayS,
      statistic,
    };
  }

  /** Long windows are read at half the rate, save near the upper edge of the octave, where that folds over. */
  #windowOf(spot: Spot): { view: View; plan: WindowPlan; first: number } {
    const isNarrow = spot.kind >= TWO_BANDS && spot.highHz <= HIGHEST_NARROW * this.#widthHz;
    const view = isNarrow ? this.#narrow : this.#wide;
    const plan = view.plans[spot.kind];
    if (!plan) throw new RangeError(`kind: ${spot.kind} is unknown`);
    return { view, plan, first: Math.floor(spot.firstSample / view.source.decimation + plan.from) };
  }
}
