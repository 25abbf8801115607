import type { PassTask } from '../../../shared/contract/passes.ts';

interface OpenPass {
  id: string;
  recordingId: string;
  task: PassTask;
  blind: boolean;
}

/** What a person is to the growth phases of a run. */
export interface PhaseStanding {
  personId: string;
  /** Contributes to the lab of the run. */
  isOfLab: boolean;
  isCurator: boolean;
  openPasses: readonly OpenPass[];
}

interface MarkedPhase {
  passId: string | null;
  createdById: string;
  /** State of the pass; `null` where the lab told the phase. */
  passState: string | null;
}

/** Phases tell when something happened: whoever marks events of the run blind sees none. */
export function areWithheld({ openPasses }: PhaseStanding): boolean {
  return openPasses.some(({ task, blind }) => task === 'events' && blind);
}

/** One pass for growth phases closes the sound of every recording of the run: several sensors heard the same. */
export function isSoundClosed({ openPasses }: PhaseStanding): boolean {
  return openPasses.some(({ task }) => task === 'phases');
}

/** In these the person may mark phases: given for phases, or for events with everything shown. */
export function phasePasses({ openPasses }: PhaseStanding): OpenPass[] {
  const fit = openPasses.filter(({ task, blind }) => task === 'phases' || !blind);
  return [...fit.filter(({ task }) => task === 'phases'), ...fit.filter(({ task }) => task !== 'phases')];
}

/** Who marks phases in a blind pass sees the own ones only; else others' too, once their pass is finished. */
export function isPhaseVisible(standing: PhaseStanding, phase: MarkedPhase): boolean {
  if (areWithheld(standing)) return false;
  if (phase.createdById === standing.personId && phase.passId !== null) return true;
  if (standing.openPasses.some(({ task, blind }) => task === 'phases' && blind)) return false;
  if (phase.passId === null || standing.isCurator) return true;
  return phase.passState === 'finished';
}

/** The lab changes what it told; what was marked in a pass is changed by its maker while the pass is open. */
export function isPhaseEditable(standing: PhaseStanding, phase: MarkedPhase): boolean {
  if (!isPhaseVisible(standing, phase)) return false;
  if (phase.passId === null) return standing.isOfLab;
  const isOpen = phasePasses(standing).some(({ id }) => id === phase.passId);
  return isOpen && phase.createdById === standing.personId;
}
