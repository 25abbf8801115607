import type { Actor } from '../../../shared/policy/actor.ts';
import type { Db } from '../../db/client.ts';
import { conflict } from '../../http/problem.ts';
import type { PassesService } from '../passes/passes.service.ts';
import type { CandidatesService } from '../recordings/candidates.service.ts';
import { selectRunOfPass } from './rounds.queries.ts';

interface Parts {
  db: Db;
  passes: Pick<PassesService, 'requireOwnOpenPass'>;
  candidates: Pick<CandidatesService, 'requireShown'>;
}

export type RoundAccess = ReturnType<ReturnType<typeof createRoundAccess>>;

/**
 * The own open pass of rounds, its recording, and the candidates it goes through: those of the run of the detector whose
 * candidates were answered first, also where the detector has run again since, so that a round neither starts anew nor
 * changes its order under way. Nobody who works blind on the recording gets here.
 */
export function createRoundAccess({ db, passes, candidates }: Parts) {
  return (actor: Actor, passId: string) => {
    const pass = passes.requireOwnOpenPass(db, actor, passId);
    if (pass.blind)
      throw conflict('This pass is blind: no candidates are shown in it, so none can be answered.');
    if (pass.kind !== 'rounds') throw conflict('This pass is not one of rounds; its marks are set by hand.');
    const shown = candidates.requireShown(actor, pass.recordingId);
    const run = selectRunOfPass(db, passId) ?? shown.run;
    return { pass, recording: shown.row, run, isReplaced: run.id !== shown.run.id };
  };
}
