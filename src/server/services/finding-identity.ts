import type { FindingFamily } from '../../schemas/finding';
import type { Finding, PricedYear } from '../../schemas/pricing';

/** What makes a finding the same one in every pricing: bill period, line and family; not its amount, cause or letter. */
export interface FindingIdentity {
  periodFrom: string;
  periodTo: string;
  lineKey: string;
  family: FindingFamily;
}

/** A finding as priced, with its identity. */
export interface IdentifiedFinding {
  finding: Finding;
  billName: string;
  identity: FindingIdentity;
}

function familyOf({ kind, lineId }: Finding): FindingFamily {
  if (kind === 'bill-arithmetic') return 'arithmetic';
  if (kind === 'energy-differs') return 'energy';
  if (lineId !== null) return 'line';
  return kind === 'line-not-in-schedule' ? 'printed-line' : 'total';
}

/** One text of an identity, to compare by. */
export const identityKey = ({ periodFrom, periodTo, lineKey, family }: FindingIdentity) =>
  JSON.stringify([periodFrom, periodTo, family, lineKey]);

/** The findings of a year with their identities; a label printed twice on a bill counts up. */
export function identifiedFindings(year: PricedYear): IdentifiedFinding[] {
  const seen = new Set<string>();
  return year.findings.flatMap((finding) => {
    const bill = year.bills.find((one) => one.bill.id === finding.billId);
    if (!bill) return [];
    const family = familyOf(finding);
    const name = finding.lineId ?? (family === 'printed-line' ? (finding.lineLabel ?? '') : '');
    const { from: periodFrom, to: periodTo } = bill.bill;
    let identity: FindingIdentity = { periodFrom, periodTo, lineKey: name, family };
    for (let count = 2; seen.has(identityKey(identity)); count += 1)
      identity = { ...identity, lineKey: `${name} #${count}` };
    seen.add(identityKey(identity));
    return [{ finding, billName: bill.name, identity }];
  });
}
