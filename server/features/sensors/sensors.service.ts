import type { SaveSensor, SaveSetup, Sensor, Setup } from '../../../shared/contract/sensors.ts';
import { abilityFor } from '../../../shared/policy/ability.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { abilityToWhere } from '../../authorize/ability-to-where.ts';
import { authorize } from '../../authorize/authorize.ts';
import { requireOwnLab } from '../../authorize/own-lab.ts';
import type { Reader } from '../../db/client.ts';
import { sensors } from '../../db/schema/sensors.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { invalidField, notFound } from '../../http/problem.ts';
import { requireSameRevision } from '../../http/revision.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { toSensor, toSetup, toSetupValues } from './sensors.map.ts';
import {
  inLab,
  insertSensor,
  insertSetup,
  selectSensor,
  selectSensors,
  selectSetup,
  selectSetups,
  updateSensor,
  updateSetup,
  type SensorView,
  type SetupView,
} from './sensors.queries.ts';

export type SensorsService = ReturnType<typeof createSensorsService>;

export function createSensorsService({
  db,
  clock,
  ids,
  audit,
}: Pick<Ground, 'db' | 'clock' | 'ids'> & { audit: AuditService }) {
  function listSensors(actor: Actor, labId?: string): { items: Sensor[] } {
    return { items: selectSensors(db, inLab(visibleSensors(actor), labId)).map(toSensor) };
  }

  function createSensor(actor: Actor, input: SaveSensor): Sensor {
    requireOwnLab(actor, input.labId);
    const id = ids.next();
    write(db, (tx) => {
      insertSensor(tx, { ...input, id, createdAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'sensor.created', { id, labId: input.labId }));
    });
    return toSensor(requireSensor(db, actor, id));
  }

  function changeSensor(actor: Actor, id: string, revision: number, input: SaveSensor): Sensor {
    write(db, (tx) => {
      const view = requireSensor(tx, actor, id);
      if (input.labId !== view.sensor.labId)
        throw invalidField('labId', 'cannot change: a sensor stays with its lab');
      requireSameRevision(revision, view.sensor.revision, toSensor(view));
      updateSensor(tx, { ...input, id, revision: revision + 1 });
      audit.record(tx, entry(actor, 'sensor.updated', view.sensor));
    });
    return toSensor(requireSensor(db, actor, id));
  }

  function listSetups(actor: Actor, labId?: string): { items: Setup[] } {
    return { items: selectSetups(db, inLab(visibleSensors(actor), labId)).map(toSetup) };
  }

  function createSetup(actor: Actor, input: SaveSetup): Setup {
    const id = ids.next();
    write(db, (tx) => {
      const sensor = requireOwnSensor(tx, actor, input.sensorId);
      insertSetup(tx, { ...toSetupValues(input), id, createdAtMs: clock.nowMs() });
      audit.record(tx, entry(actor, 'setup.created', { id, labId: sensor.sensor.labId }));
    });
    return toSetup(requireSetup(db, actor, id));
  }

  function changeSetup(actor: Actor, id: string, revision: number, input: SaveSetup): Setup {
    write(db, (tx) => {
      const view = requireSetup(tx, actor, id);
      const { sensor } = requireOwnSensor(tx, actor, input.sensorId);
      if (sensor.labId !== view.sensor.labId) throw invalidField('sensorId', 'is a sensor of another lab');
      requireSameRevision(revision, view.setup.revision, toSetup(view));
      updateSetup(tx, { ...toSetupValues(input), id, revision: revision + 1 });
      audit.record(tx, entry(actor, 'setup.updated', { id, labId: sensor.labId }));
    });
    return toSetup(requireSetup(db, actor, id));
  }

  /** For features that take the id of a set-up from a person's input. */
  function requireSetupOfLab(tx: Reader, setupId: string, labId: string): Setup {
    const view = selectSetup(tx, setupId);
    if (view?.sensor.labId !== labId) throw invalidField('setupId', 'is not a set-up of the lab of this run');
    return toSetup(view);
  }

  return {
    listSensors,
    createSensor,
    updateSensor: changeSensor,
    listSetups,
    createSetup,
    updateSetup: changeSetup,
    requireSetupOfLab,
  };
}

function visibleSensors(actor: Actor) {
  return abilityToWhere(abilityFor(actor), 'read', 'Sensor', { labId: sensors.labId });
}

function requireSensor(db: Reader, actor: Actor, id: string): SensorView {
  const view = selectSensor(db, id);
  if (view === undefined) throw notFound();
  authorizeUpdate(actor, view.sensor.labId);
  return view;
}

function requireSetup(db: Reader, actor: Actor, id: string): SetupView {
  const view = selectSetup(db, id);
  if (view === undefined) throw notFound();
  authorizeUpdate(actor, view.sensor.labId);
  return view;
}

function authorizeUpdate(actor: Actor, labId: string): void {
  const detail = 'Only the contributors of its lab may change this.';
  authorize(actor, { action: 'update', name: 'Sensor', row: { labId }, detail });
}

function requireOwnSensor(db: Reader, actor: Actor, sensorId: string): SensorView {
  const view = selectSensor(db, sensorId);
  // One answer for what is missing and for what belongs to others.
  const refused = { path: 'sensorId', message: 'is of no lab that you contribute to' };
  requireOwnLab(actor, view?.sensor.labId ?? '', refused);
  if (view === undefined) throw notFound();
  return view;
}

function entry(actor: Actor, action: string, subject: { id: string; labId: string }) {
  const subjectType = action.startsWith('sensor') ? 'Sensor' : 'Setup';
  return { personId: actor.id, action, subjectType, subjectId: subject.id, labId: subject.labId };
}
