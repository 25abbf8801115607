import type { RecalescenceProposal } from '../../../shared/contract/traces.ts';
import { runTimeNsOf } from '../../../shared/domain/trace-clock.ts';
import { adiabaticIceShare } from '../../signal/ice-melting.ts';
import type { NoRecalescence, Recalescence } from '../../signal/recalescence.ts';
import type { TraceRow } from './traces.queries.ts';
import type { MeltingPoint } from './water-run.ts';

/** A jump on the clock of the run, with the figures that go with it. */
export function toProposal(jump: Recalescence, trace: TraceRow, melting: MeltingPoint): RecalescenceProposal {
  const meltingPointC = melting.meltingPointC ?? jump.plateauC;
  const supercoolingK = meltingPointC - jump.nucleationC;
  const facts = {
    onsetNs: runTimeNsOf(jump.onsetS, trace),
    onsetUncertaintyNs: Math.ceil(jump.onsetUncertaintyS * 1e9),
    endNs: runTimeNsOf(jump.endS, trace),
    nucleationC: jump.nucleationC,
    plateauC: jump.plateauC,
    supercoolingK,
    meltingPointC,
    meltingPointFrom: melting.meltingPointC === null ? ('plateau' as const) : ('water' as const),
    riseRateKPerS: jump.riseRateKPerS,
    frozenShare: melting.isWater ? adiabaticIceShare(supercoolingK) : null,
  };
  return { ...facts, words: proposalWords(facts) };
}

function proposalWords(facts: Omit<RecalescenceProposal, 'words'>): string {
  const { nucleationC, plateauC, supercoolingK, meltingPointFrom, frozenShare } = facts;
  const from = meltingPointFrom === 'water' ? 'the melting point of pure water' : 'the plateau';
  const jump = `The temperature jumps from ${celsius(nucleationC)} to ${celsius(plateauC)}, ${kelvin(supercoolingK)} below ${from} before the jump`;
  if (frozenShare === null) return `${jump}.`;
  const percent = Number((frozenShare * 100).toPrecision(2));
  return `${jump}; without heat lost this is consistent with about ${percent} % of the water frozen in the flash.`;
}

function celsius(value: number): string {
  return `${signed(value.toFixed(1))} °C`;
}

function kelvin(value: number): string {
  return `${signed(value.toFixed(1))} K`;
}

function signed(text: string): string {
  return Number(text) === 0 ? text.replace('-', '') : text.replace('-', '\u2212');
}

export function noProposalWords(reason: NoRecalescence, { meltingPointC }: MeltingPoint): string {
  const melting =
    meltingPointC === null ? 'the melting point' : `the melting point, ${celsius(meltingPointC)}`;
  const sentences: Record<NoRecalescence, string> = {
    'too-short': 'The trace has too few points to look for recalescence.',
    flat: 'No recalescence was found: the temperature never leaves its noise.',
    'no-rise': 'No recalescence was found: the temperature never rises out of its noise.',
    'never-cools': 'No recalescence was found: nothing shows that it cooled before it rose.',
    'too-slow':
      'No recalescence was found: what rises does so little faster than the temperature changed before.',
    'not-supercooled': `No recalescence was found: every jump begins at or above ${melting}.`,
    'past-melting': `No recalescence was found: what jumps goes past ${melting}, so it was warmed from outside.`,
  };
  return sentences[reason];
}
