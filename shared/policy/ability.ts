import { AbilityBuilder, createMongoAbility, subject, type MongoAbility } from '@casl/ability';
import { labsOf, labsWhere, type Actor } from './actor.ts';
import type { Action, SubjectFields, SubjectName } from './subjects.ts';

export type AppAbility = MongoAbility<[Action, SubjectName | object]>;
type Can = AbilityBuilder<AppAbility>['can'];

/** The one place that says who may do what. Conditions are limited to equality and `$in` on `SubjectFields`. */
export function abilityFor(actor: Actor | null): AppAbility {
  const { can, build } = new AbilityBuilder<AppAbility>(createMongoAbility);
  can('read', 'Release', { state: { $in: ['published', 'withdrawn'] } });
  if (!actor) return build();
  ofContributors(can, actor);
  ofReviewers(can, actor);
  if (actor.roles.includes('labeler')) ofLabelers(can, actor);
  if (actor.roles.includes('curator')) ofCurators(can);
  if (actor.roles.includes('administrator')) ofAdministrators(can);
  return build();
}

/** CASL answers a bare type with "some rule could match": always ask with the row. */
export function may<Name extends SubjectName>(
  ability: AppAbility,
  action: Action,
  name: Name,
  row: SubjectFields[Name],
): boolean {
  return ability.can(action, subject(name, { ...row }));
}

function ofContributors(can: Can, actor: Actor): void {
  const own = labsWhere(actor, 'contributor');
  if (own.length === 0) return;
  can(['read', 'create', 'update'], ['Run', 'Sensor'], { labId: { $in: own } });
  can('read', 'Run', { isShared: true });
  can(['read', 'create'], 'Upload', { labId: { $in: own } });
  can(['update', 'delete'], 'Upload', { labId: { $in: own }, ownerId: actor.id });
  can(['read', 'listen', 'update'], 'Recording', { labId: { $in: own } });
  can(['read', 'listen'], 'Recording', { sharing: 'shared' });
  can('read', 'Lab', { id: { $in: own } });
}

/** Whoever decides is not the one who brought it in: the decision itself checks `uploadedById` as well. */
function ofReviewers(can: Can, actor: Actor): void {
  const trusted = labsWhere(actor, 'reviewer');
  if (trusted.length === 0) return;
  can('read', ['Run', 'Sensor'], { labId: { $in: trusted } });
  can('read', 'Run', { isShared: true });
  can(['read', 'listen', 'decide'], 'Recording', { labId: { $in: trusted } });
  can(['read', 'listen'], 'Recording', { sharing: 'shared' });
  can('read', 'Lab', { id: { $in: labsOf(actor) } });
}

/** Recordings come by assignment: the pass is looked up beside these rules, since it is another table. */
function ofLabelers(can: Can, actor: Actor): void {
  can(['read', 'update'], 'Pass', { labelerId: actor.id });
  can(['read', 'create', 'update', 'delete'], 'Event', { createdById: actor.id });
}

function ofCurators(can: Can): void {
  can('read', 'Run', { isShared: true });
  can(['read', 'listen', 'assign'], 'Recording', { sharing: 'shared' });
  can(['read', 'create', 'delete'], 'Pass');
  can('read', 'Event');
  can(['read', 'create', 'update'], 'Collection');
  can(['read', 'create', 'publish'], 'Release');
}

function ofAdministrators(can: Can): void {
  can('manage', ['Lab', 'Person']);
  can('read', 'Audit');
}
