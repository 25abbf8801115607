import { rulesToAST } from '@casl/ability/extra';
import { and, eq, inArray, ne, not, or, sql, type SQL, type SQLWrapper } from 'drizzle-orm';
import type { AppAbility } from '../../shared/policy/ability.ts';
import type { Action, SubjectFields, SubjectName } from '../../shared/policy/subjects.ts';

/** Column or expression that stands for each field that a rule may look at. */
export type SubjectColumns<Name extends SubjectName> = { [Field in keyof SubjectFields[Name]]: SQLWrapper };

interface Condition {
  operator: string;
  field?: string;
  value: unknown;
}

const everything = sql`1`;
const nothing = sql`0`;

/** The rows on which the ability allows the action, as a condition: what may not be seen is never fetched or counted. */
export function abilityToWhere<Name extends SubjectName>(
  ability: AppAbility,
  action: Action,
  name: Name,
  columns: SubjectColumns<Name>,
): SQL {
  const condition = rulesToAST(ability, action, name) as Condition | null;
  if (!condition) return nothing;
  return toSql(condition, columns as Record<string, SQLWrapper>);
}

function toSql(condition: Condition, columns: Record<string, SQLWrapper>): SQL {
  if (condition.field === undefined) return compoundToSql(condition, columns);
  const column = columns[condition.field];
  if (!column) throw new RangeError(`rule on unknown field ${condition.field}`);
  switch (condition.operator) {
    case 'eq':
      return eq(column, bindable(condition.value));
    case 'ne':
      return ne(column, bindable(condition.value));
    case 'in':
      return inArray(column as SQL, condition.value as unknown[]);
    default:
      throw new RangeError(`rule with operator ${condition.operator}`);
  }
}

/** SQLite knows no booleans, and an expression, unlike a column, does not translate them. */
function bindable(value: unknown): unknown {
  return typeof value === 'boolean' ? Number(value) : value;
}

function compoundToSql(condition: Condition, columns: Record<string, SQLWrapper>): SQL {
  const parts = (condition.value as Condition[]).map((part) => toSql(part, columns));
  switch (condition.operator) {
    case 'and':
      return and(...parts) ?? everything;
    case 'or':
      return or(...parts) ?? nothing;
    case 'not':
      return not(parts[0] ?? nothing);
    default:
      throw new RangeError(`rule with operator ${condition.operator}`);
  }
}
