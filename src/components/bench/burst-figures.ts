import type { BurstParameters } from '@shared/contract/measurement.ts';
import { formatNumber, formatShare, NO_VALUE } from '@/composables/useFormat.ts';

const TWO_DECIMALS: Intl.NumberFormatOptions = { maximumFractionDigits: 2 };
const THREE_DIGITS: Intl.NumberFormatOptions = { maximumSignificantDigits: 3 };

type Peak = Pick<BurstParameters, 'peakDb' | 'peakDbAe'>;
type Figures = Peak & Pick<BurstParameters, 'peakFrequencyHz' | 'ultrasonicShare'>;

/** Heading of the column of peaks: they are all in dB(AE), or all re full scale. */
export function peakUnit(bursts: readonly (Peak | null)[]): string {
  return bursts.some((burst) => typeof burst?.peakDbAe === 'number') ? 'dB(AE)' : 'dB';
}

/** Figures without units, for tables that have the unit in their heading. */
export function burstFigures(burst: Figures | null) {
  if (!burst) return { peak: NO_VALUE, frequency: NO_VALUE, share: NO_VALUE };
  const kilohertz = burst.peakFrequencyHz === null ? null : burst.peakFrequencyHz / 1000;
  return {
    peak: formatNumber(burst.peakDbAe ?? burst.peakDb, {
      minimumFractionDigits: 1,
      maximumFractionDigits: 1,
    }),
    frequency: formatNumber(kilohertz, kilohertz !== null && kilohertz < 1 ? TWO_DECIMALS : THREE_DIGITS),
    share: formatShare(burst.ultrasonicShare).replace(/\u00A0%$/, ''),
  };
}
