import { capital, formatDate, formatMonth, formatMoney } from '../../components/ui/format';
import { addMonths } from '../../core/load';
import type { Schedule } from '../../core/tariff';
import type { FindingView, RecoveredView } from '../../schemas/finding';
import type { PricedYear } from '../../schemas/pricing';
import type { TariffSheetView } from '../../schemas/tariff-sheet';
import type { UtilityLetterSummary } from '../../schemas/utility-letter';
import type { Actor } from '../policies/actor';
import { reactiveCostData, reactiveParts, type ReactiveParts } from '../presenters/reactive-cost';
import { straddleWords } from '../presenters/schedule';
import { presentTariffSheet } from '../presenters/tariff-sheet';
import { findingSlips, type FindingSlipWords } from '../presenters/finding-slips';
import { reactiveFinding, tariffHeadline, tariffLead } from '../presenters/tariff-words';
import { findingsOf, recoveredOf } from './finding-records';
import { originsOf } from './line-memory';
import { pricingBasis } from './pricing';
import { tariffStation, type TariffStation } from './tariff';
import { listUtilityLetters } from './utility-letters';

/** The station Tariff with every word of its page. */
export interface TariffPage {
  station: TariffStation;
  sheet: TariffSheetView | null;
  reactive: { data: ReturnType<typeof reactiveCostData>; parts: ReactiveParts; finding: string } | null;
  slips: FindingSlipWords[];
  /** What was found, with its states; those raised that are found no more stand last. */
  findings: FindingView[];
  recovered: RecoveredView;
  letters: UtilityLetterSummary[];
  monthBefore: string | null;
  broken: { where: string; message: string; remedy: string }[];
  words: {
    headline: string;
    lead: string;
    ledgerTitle: string;
    references: string[];
    tolerance: string;
    choiceLead: string;
  };
}

/** Everything the page of the station Tariff shows. */
export async function tariffPage(actor: Actor, code: string): Promise<TariffPage> {
  const station = await tariffStation(actor, code);
  const { year, choice, library } = station;
  const basis = year ? await pricingBasis(station.opened) : null;
  const findings = year ? await findingsOf(station.opened, year) : [];
  const first = basis?.periods[0]?.from ?? station.opened.engagement.yearFrom;
  return {
    station,
    sheet:
      year && choice && basis
        ? presentTariffSheet(year, {
            code,
            choiceVersion: choice.version,
            origins: await originsOf(actor, basis.choice),
          })
        : null,
    reactive: year && reactiveOf(year),
    slips: year ? findingSlips(year, findings) : [],
    findings,
    recovered: recoveredOf(findings),
    letters: await listUtilityLetters(station.opened.engagement.id),
    monthBefore: formatMonth(addMonths(first, -1)),
    broken: library.flatMap(({ fileName, problems }) =>
      problems.map(({ line, column, path, message, remedy }) => ({
        where: `${fileName}:${line}:${column}${path ? ` ${path}` : ''}`,
        message,
        remedy,
      })),
    ),
    words: {
      ...headOf(station, basis?.schedule ?? null),
      ledgerTitle: year ? `${titleCount(year.bills.length)}, priced against billed` : '',
      references: basis ? referencesOf(basis.schedule) : [],
      tolerance: year ? toleranceOf(year) : '',
      choiceLead: choice
        ? 'What the pricing stands on. A change prices the year again.'
        : 'The schedule the utility billed on, with what the contract supplies to it.',
    },
  };
}

function reactiveOf(year: PricedYear): TariffPage['reactive'] {
  const parts = reactiveParts(year);
  return { data: reactiveCostData(year), parts, finding: reactiveFinding(parts, year.currency) };
}

function headOf({ year, choice }: TariffStation, schedule: Schedule | null): { headline: string; lead: string } {
  if (year && schedule) return { headline: tariffHeadline(year), lead: tariffLead(year, schedule) };
  if (choice)
    return {
      headline: 'The year cannot be priced yet.',
      lead: 'The schedule is chosen; what is missing is named below.',
    };
  return {
    headline: 'Choose the schedule this year was billed on.',
    lead: 'Then every bill is priced line by line beside what the utility charged, and every difference is looked into.',
  };
}

const titleCount = (count: number) => (count === 12 ? 'Twelve bills' : count === 1 ? 'One bill' : `${count} bills`);

function referencesOf(schedule: Schedule): string[] {
  const { publisher, title, date, status } = schedule.source;
  const source = [publisher, title, date && formatDate(date)].filter(Boolean).join(', ');
  const text = schedule.texts.at(-1)!;
  const clauses = text.charges.flatMap(({ label, name, clause }) =>
    clause ? [`${label ?? name}: clause ${clause}`] : [],
  );
  return [
    status === 'found' ? source : `${source}${status ? ` (${status})` : ''}`,
    ...clauses,
    capital(straddleWords(schedule)),
    'r: set by the ratchet',
  ].filter(Boolean);
}

function toleranceOf({ bills, currency, toleranceMinor }: PricedYear): string {
  const compared = bills.some(({ differenceMinor }) => differenceMinor !== null);
  if (!compared) return 'No bill could be compared.';
  const small = bills.filter(({ findings, differenceMinor }) => findings.length === 0 && differenceMinor);
  const tolerance = formatMoney(toleranceMinor, currency);
  const names = small.map(({ name }) => name);
  const head =
    names.length === 0
      ? 'Every other bill agrees to the cent.'
      : `${names.join(', ')} ${names.length === 1 ? 'differs' : 'differ'} by cents: rounding of single lines.`;
  return `${head} Tolerance ${tolerance} a line.`;
}
