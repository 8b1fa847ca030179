import type { FindingView, RecoveredView } from '../../schemas/finding';
import type { PricedYear } from '../../schemas/pricing';
import { today } from '../clock';
import { actAs } from '../db/context';
import { inTx } from '../db/tx';
import { Finding } from '../models/Finding';
import { FindingChange } from '../models/FindingChange';
import { User } from '../models/User';
import { UtilityLetter } from '../models/UtilityLetter';
import { presentFinding } from '../presenters/finding';
import type { OpenEngagement } from './engagements';
import { identifiedFindings, identityKey, type IdentifiedFinding } from './finding-identity';
import { pricedYear } from './pricing';

type Rows = Map<string, Finding>;

async function rowsOf(engagementId: number): Promise<Rows> {
  const rows = await Finding.findAll({ where: { engagementId }, order: ['id'] });
  return new Map(rows.map((row) => [identityKey(row), row]));
}

const factsOf = ({ finding }: IdentifiedFinding) => ({
  title: finding.title,
  lineLabel: finding.lineLabel,
  amountMinor: finding.amountMinor,
  found: true,
});

function isKept(row: Finding | undefined, found: IdentifiedFinding): boolean {
  return row !== undefined && Object.entries(factsOf(found)).every(([name, value]) => row.get(name) === value);
}

/** Rows that the newest pricing finds no more. */
const goneOf = (rows: Rows, found: IdentifiedFinding[]): Finding[] => {
  const keys = new Set(found.map(({ identity }) => identityKey(identity)));
  return [...rows].flatMap(([key, row]) => (row.found && !keys.has(key) ? [row] : []));
};

/** Brings the rows to what the newest pricing found. States stay as people left them. */
async function record(engagementId: number, found: IdentifiedFinding[]): Promise<Rows> {
  const rows = await rowsOf(engagementId);
  for (const one of found) {
    const row = rows.get(identityKey(one.identity));
    if (isKept(row, one)) continue;
    if (row) await row.update(factsOf(one));
    else await Finding.create({ engagementId, ...one.identity, ...factsOf(one), state: 'open', since: today() });
  }
  for (const row of goneOf(rows, found)) await row.update({ found: false });
  return rowsOf(engagementId);
}

/** The rows of what a year found; written only where the pricing says something new, in the name of the system. */
async function recorded(engagementId: number, found: IdentifiedFinding[]): Promise<Rows> {
  const rows = await rowsOf(engagementId);
  const isNew = found.some((one) => !isKept(rows.get(identityKey(one.identity)), one));
  if (!isNew && goneOf(rows, found).length === 0) return rows;
  return actAs({ actorId: null, ip: null }, () => inTx(() => record(engagementId, found)));
}

/** The findings of a priced year with what people decided: those found, then those raised that are found no more. */
export async function findingsOf(opened: OpenEngagement, year: PricedYear): Promise<FindingView[]> {
  const found = identifiedFindings(year);
  const rows = await recorded(opened.engagement.id, found);
  const all = [...rows.values()];
  const ids = all.map(({ id }) => id);
  const [changes, letters] = await Promise.all([
    FindingChange.findAll({ where: { findingId: ids }, order: ['id'] }),
    UtilityLetter.findAll({ where: { engagementId: opened.engagement.id }, attributes: ['id', 'number', 'state'] }),
  ]);
  const users = await User.findAll({
    where: { id: changes.flatMap(({ byId }) => byId ?? []) },
    attributes: ['id', 'name'],
  });
  const about = {
    names: new Map(users.map(({ id, name }) => [id, name])),
    letters: new Map(letters.map(({ id, number, state }) => [id, state === 'failed' ? null : number])),
  };
  const view = (row: Finding, one: IdentifiedFinding | null) =>
    presentFinding(row, one, { ...about, changes: changes.filter(({ findingId }) => findingId === row.id) });
  const present = found.map((one) => view(rows.get(identityKey(one.identity))!, one));
  const gone = all.filter((row) => !row.found && row.state !== 'open' && row.state !== 'dropped');
  return [...present, ...gone.map((row) => view(row, null))];
}

/** A year's findings by how they stand, for taps and lists. @throws {ServiceError} 409 where the year cannot be priced */
export async function findingsSummary(opened: OpenEngagement) {
  const year = await pricedYear(opened);
  const findings = await findingsOf(opened, year);
  const incomplete = year.bills.filter((bill) => bill.missingReadings > 0).length;
  return { year, findings, incomplete };
}

/** What was claimed of the utility, what it agreed to, and what came back. */
export function recoveredOf(findings: FindingView[]): RecoveredView {
  const sum = (states: FindingView['state'][]) =>
    findings
      .filter(({ state }) => states.includes(state))
      .reduce((total, { wasMinor, amountMinor }) => total + (wasMinor ?? amountMinor), 0);
  return {
    claimedMinor: sum(['raised', 'agreed', 'refunded']),
    agreedMinor: sum(['agreed', 'refunded']),
    refundedMinor: findings.reduce((total, { refunded }) => total + (refunded?.amountMinor ?? 0), 0),
  };
}
