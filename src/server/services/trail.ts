import { Op, type WhereOptions } from 'sequelize';
import { addDays } from '../../core/load';
import { trailFilterInput, type TrailFilter, type TrailView } from '../../schemas/trail';
import { forbidden, notFound } from '../errors';
import { Trail } from '../models/Trail';
import { User } from '../models/User';
import { isStaff, type Actor } from '../policies/actor';
import { canReadTrail } from '../policies/engagement';
import { presentTrail } from '../presenters/trail';

const pageLength = 100;

function whereOf(filter: TrailFilter): WhereOptions {
  const where: Record<string, unknown> = {};
  if (filter.who !== null) where.actorId = filter.who === 0 ? null : filter.who;
  if (filter.subject) where.subject = filter.subject;
  if (filter.row !== null) where.subjectId = filter.row;
  if (filter.action) where.action = filter.action;
  const from = filter.from ? { [Op.gte]: new Date(`${filter.from}T00:00:00Z`) } : {};
  const to = filter.to ? { [Op.lt]: new Date(`${addDays(filter.to, 1)}T00:00:00Z`) } : {};
  if (filter.from || filter.to) where.at = { ...from, ...to };
  return where;
}

/**
 * The trail, newest first, filtered by who, what and when. A filter that cannot be read filters nothing.
 *
 * @throws {ServiceError} 404 to clients, 403 to consultants
 */
export async function readTrail(actor: Actor, query: Record<string, string>): Promise<TrailView> {
  if (!isStaff(actor)) throw notFound();
  if (!canReadTrail(actor)) throw forbidden('The trail is read by partners only.');
  const filter = trailFilterInput.parse(query);
  const where = whereOf(filter);
  const [count, subjects, users] = await Promise.all([
    Trail.count({ where }),
    Trail.aggregate('subject', 'DISTINCT', { plain: false }) as Promise<unknown>,
    User.findAll({ attributes: ['id', 'name'], order: ['name'] }),
  ]);
  const pages = Math.max(1, Math.ceil(count / pageLength));
  const page = Math.min(filter.page, pages);
  const rows = await Trail.findAll({
    where,
    order: [['id', 'DESC']],
    limit: pageLength,
    offset: (page - 1) * pageLength,
  });
  const names = new Map(users.map((user) => [user.id, user.name]));
  return {
    rows: rows.map((row) => presentTrail(row, names)),
    count,
    page,
    pages,
    filter,
    subjects: (subjects as { DISTINCT: string }[]).map((row) => row.DISTINCT).sort(),
    people: users.map(({ id, name }) => ({ id, name })),
  };
}
