import { formatMoney, formatSpelled } from '../../components/ui/format';
import type { FindingView } from '../../schemas/finding';
import type { Finding, PricedYear } from '../../schemas/pricing';

/** One slip of the result column: a finding, or several of one kind in one line of many bills that stand alike. */
export interface FindingSlipWords {
  /** Letter of the first. */
  letter: string;
  title: string;
  amountMinor: number;
  text: string;
  /** How it stands; null where it has no row yet. */
  finding: FindingView | null;
}

const mostAlone = 2;

/** The findings as slips; more than two of one kind in the same line and state become one. */
export function findingSlips({ findings, bills, currency }: PricedYear, views: FindingView[]): FindingSlipWords[] {
  const viewOf = ({ letter }: Finding) => views.find((view) => view.letter === letter) ?? null;
  const groups = new Map<string, Finding[]>();
  for (const finding of findings) {
    const key = `${finding.kind} ${finding.lineLabel} ${viewOf(finding)?.state}`;
    groups.set(key, [...(groups.get(key) ?? []), finding]);
  }
  const nameOf = (finding: Finding) => bills.find(({ bill }) => bill.id === finding.billId)?.name ?? '';
  return [...groups.values()].flatMap((group) => {
    if (group.length <= mostAlone) {
      return group.map((finding) => {
        const { letter, title, amountMinor, sentence } = finding;
        return { letter, title, amountMinor, text: sentence, finding: viewOf(finding) };
      });
    }
    const [first] = group;
    const parts = group.map((one) => `${nameOf(one)} ${formatMoney(one.amountMinor, currency)}`);
    const amountMinor = group.reduce((sum, one) => sum + one.amountMinor, 0);
    const text = `${first!.lineLabel ?? 'The bill as a whole'} in ${formatSpelled(group.length)} bills: ${parts.join(', ')}.`;
    const title = `${first!.title}, ${formatSpelled(group.length)} times`;
    return [{ letter: first!.letter, title, amountMinor, text, finding: viewOf(first!) }];
  });
}
