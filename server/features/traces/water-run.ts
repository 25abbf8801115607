import type { Run } from '../../../shared/contract/runs.ts';
import { waterMeltingPointC } from '../../signal/ice-melting.ts';

export interface MeltingPoint {
  /** `null` where the material tells none: then a plateau stands for it. */
  meltingPointC: number | null;
  isWater: boolean;
  remarks: string[];
}

const atmospherePa = 101_325;
const water = /^\s*((pure|distilled|de-?ionised|de-?ionized|tap|ultrapure|degassed)\s+)*(water|ice|h2o)\s*$/i;
/** What lowers the melting point by an amount that nobody told. */
const dissolved = /salt|brine|nacl|sugar|sucrose|glycerol|alcohol|ethanol|solution|acid|\d\s*(%|mol|g\/l)/i;

/** Only water has a melting point that is known from its name, and its pressure moves it. */
export function meltingPointOf({ material, composition, pressurePa }: Run): MeltingPoint {
  const isWater = water.test(material) && !dissolved.test(composition ?? '');
  if (!isWater) return { meltingPointC: null, isWater, remarks: [] };
  const meltingPointC = waterMeltingPointC(pressurePa ?? atmospherePa);
  if (meltingPointC === null)
    return {
      meltingPointC: null,
      isWater,
      remarks: [
        'At the pressure of this run another ice than the common one melts; the plateau is taken for it.',
      ],
    };
  return { meltingPointC, isWater, remarks: [] };
}
