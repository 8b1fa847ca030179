import {
  DataTypes,
  Model,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type ModelStatic,
} from 'sequelize';
import { currentTransaction, sequelize } from '../db/connection';
import { currentActor } from '../db/context';

/** One change of one row: who, when, what, before and after. */
export class Trail extends Model<InferAttributes<Trail>, InferCreationAttributes<Trail>> {
  declare id: CreationOptional<number>;
  declare at: Date;
  declare actorId: number | null;
  declare ip: string | null;
  declare action: 'create' | 'update' | 'delete';
  declare subject: string;
  declare subjectId: number | null;
  declare before: Record<string, unknown> | null;
  declare after: Record<string, unknown> | null;
}

Trail.init(
  {
    id: { type: DataTypes.INTEGER, primaryKey: true, autoIncrement: true },
    at: { type: DataTypes.DATE, allowNull: false },
    actorId: DataTypes.INTEGER,
    ip: DataTypes.TEXT,
    action: { type: DataTypes.TEXT, allowNull: false },
    subject: { type: DataTypes.TEXT, allowNull: false },
    subjectId: DataTypes.INTEGER,
    before: DataTypes.JSON,
    after: DataTypes.JSON,
  },
  { sequelize, tableName: 'trail_rows', timestamps: false },
);

const neverShown = new Set(['passwordHash', 'hash', 'createdAt', 'updatedAt']);
const longestText = 2000;

/** What of a value goes into the trail: bytes and long texts by their size, secrets not at all. */
function shown(value: unknown): unknown {
  if (value instanceof Uint8Array) return `${value.byteLength} bytes`;
  if (typeof value === 'string' && value.length > longestText)
    return `${value.slice(0, longestText)}... (${value.length} characters)`;
  if (value !== null && typeof value === 'object' && !(value instanceof Date)) {
    const text = JSON.stringify(value);
    return text.length > longestText ? `${text.slice(0, longestText)}... (${text.length} characters)` : value;
  }
  return value;
}

function pick(values: Record<string, unknown>, names: string[]): Record<string, unknown> {
  return Object.fromEntries(
    names
      .filter((name) => name in values)
      .map((name) => [name, neverShown.has(name) ? 'not shown' : shown(values[name])]),
  );
}

interface Change {
  action: Trail['action'];
  before: Record<string, unknown> | null;
  after: Record<string, unknown> | null;
}

async function write(row: Model, change: Change): Promise<void> {
  const subject = row.constructor.name;
  if (!currentTransaction()) throw new Error(`${subject} was written outside inTx: no trail row would belong to it.`);
  const id: unknown = row.get('id' as never);
  await Trail.create({
    at: new Date(),
    ...currentActor(),
    subject,
    subjectId: typeof id === 'number' ? id : null,
    ...change,
  });
}

/** Gives a model its trail: every create, update and delete of a row writes one, in the same transaction. */
export function withTrail<Kind extends ModelStatic<Model>>(model: Kind): Kind {
  const stamps = new Set(['createdAt', 'updatedAt']);
  const names = Object.keys(model.getAttributes()).filter((name) => !stamps.has(name));
  const before = new WeakMap<Model, Record<string, unknown>>();
  const now = (row: Model, of: string[]) => pick(row.get() as Record<string, unknown>, of);
  model.addHook('afterCreate', (row: Model) => write(row, { action: 'create', before: null, after: now(row, names) }));
  model.addHook('beforeUpdate', (row: Model) => {
    const changed = (row.changed() || []).filter((name) => !stamps.has(name));
    before.set(row, pick(Object.fromEntries(changed.map((name) => [name, row.previous(name as never)])), changed));
  });
  model.addHook('afterUpdate', async (row: Model) => {
    const previous = before.get(row) ?? {};
    const changed = Object.keys(previous);
    if (changed.length > 0) await write(row, { action: 'update', before: previous, after: now(row, changed) });
  });
  model.addHook('afterDestroy', (row: Model) => write(row, { action: 'delete', before: now(row, names), after: null }));
  // A change of many rows at once goes row by row, so that each leaves its trail.
  model.addHook('beforeBulkUpdate', (options: { individualHooks?: boolean }) => void (options.individualHooks = true));
  model.addHook('beforeBulkDestroy', (options: { individualHooks?: boolean }) => void (options.individualHooks = true));
  return model;
}
