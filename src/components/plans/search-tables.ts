import { toMinorUnits } from '../../core/units';
import type { AlternativeView, LimitHours } from '../../schemas/search';
import { formatNumber } from '../ui/format';
import type { LedgerData } from '../ui/ledger';
import { amperes } from '../ui/setting-words';

/** Ways to act with their bills, cost and present value, the best first; the plant as it stands last. */
export function alternativesTable(
  alternatives: AlternativeView[],
  standingTotal: number,
  currency: string,
): LedgerData {
  const money = (amount: number) => toMinorUnits(amount, currency);
  return {
    columns: [
      { key: 'what', head: 'What is done', wrap: true, strong: true },
      { key: 'words', head: 'With', wrap: true },
      { key: 'year', head: 'Bills of the year', kind: 'money', currency },
      { key: 'capital', head: 'Work, once', kind: 'money', currency },
      { key: 'npv', head: 'Present value', kind: 'money', currency, signed: true },
    ],
    rows: [
      ...alternatives.map(({ kind, name, words, yearTotal, capitalCost, npv }) => ({
        id: kind,
        cells: { what: name, words, year: money(yearTotal), capital: money(capitalCost), npv: money(npv) },
      })),
      {
        id: 'standing',
        cells: { what: 'Leave the plant as it stands', words: '', year: money(standingTotal), capital: 0, npv: 0 },
      },
    ],
  };
}

/** Running hours by the nearest limit, and what bounds the field. */
export function limitsTable(limits: LimitHours[]): LedgerData {
  return {
    columns: [
      { key: 'motor', head: 'Motor', strong: true },
      { key: 'range', head: 'May be set', wrap: true },
      { key: 'ends', head: 'Ends set by', wrap: true },
      { key: 'field', head: 'Nearest to the field limit', unit: 'h', align: 'right' },
      { key: 'armature', head: 'To the stator limit', unit: 'h', align: 'right' },
      { key: 'pullOut', head: 'To pull-out', unit: 'h', align: 'right' },
    ],
    rows: limits.map(({ motorId, name, nearest, bounds }) => ({
      id: String(motorId),
      cells: {
        motor: name,
        range: bounds ? `${amperes(bounds.lowA)} to ${amperes(bounds.highA)}` : '',
        ends: bounds ? `low: ${bounds.lowWords}; high: ${bounds.highWords}` : '',
        field: formatNumber(nearest.field),
        armature: formatNumber(nearest.armature),
        pullOut: formatNumber(nearest.pullOut),
      },
    })),
  };
}
