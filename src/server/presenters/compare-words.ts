import {
  capital,
  formatList,
  formatMoney,
  formatNumber,
  formatPercent,
  formatSpelled,
} from '../../components/ui/format';
import type { CheaperStretch } from '../../core/tariff';
import type { CompareColumn, CompareSweep, CompareView, NotComparable } from '../../schemas/compare';

const before = 'before any change of field current';

/** Heading and lead of the comparison: the finding with its amount. */
export function compareHead(view: CompareView | null, unpriced: NotComparable[]): { headline: string; lead: string } {
  const [standing, ...others] = view?.columns ?? [];
  if (!view || !standing || others.length === 0) {
    if (unpriced.length > 0) {
      const names = formatList(unpriced.map(({ title }) => title));
      return { headline: `This year cannot be priced on ${names}.`, lead: 'Why is said below; nothing was changed.' };
    }
    return {
      headline: 'Would this year have cost less on another schedule?',
      lead: 'Choose schedules of the library and say what the contract would supply to them.',
    };
  }
  const from = view.route === 'intervals' ? 'the same meter readings' : 'the quantities printed on the bills';
  const cost = [...view.columns].map(({ name, reactiveMinor }) => `${money(reactiveMinor, view)} on ${name}`);
  return {
    headline: headlineOf(standing, others, view),
    lead: `Every bill priced from ${from}. Poor power factor costs ${formatList(cost)}.`,
  };
}

const money = (minor: number, { currency }: CompareView) => formatMoney(minor, currency, { whole: true });

function headlineOf(standing: CompareColumn, others: CompareColumn[], view: CompareView): string {
  const best = others.reduce((least, other) => (other.totalMinor < least.totalMinor ? other : least));
  const amount = money(Math.abs(best.differenceMinor), view);
  const many = formatSpelled(others.length + 1);
  if (best.differenceMinor === 0)
    return `${best.name} would cost this year exactly what ${standing.name} does, ${before}.`;
  if (others.length === 1) {
    const more = best.differenceMinor > 0;
    return `On ${best.name} the same year would cost ${amount} ${more ? 'more' : 'less'} than on ${standing.name}, ${before}.`;
  }
  return best.differenceMinor < 0
    ? `${best.name} is the cheapest of ${many}: the same year would cost ${amount} less than on ${standing.name}, ${before}.`
    : `${standing.name} is the cheapest of ${many}; ${best.name} comes next and would cost ${amount} more, ${before}.`;
}

type Names = (id: string) => string;

const mostListed = 3;

/** Where two schedules cost the same as lagging kvarh are taken away. */
export function shareWords(sweep: CompareSweep, id: string, nameOf: Names): string {
  const factorAt = (share: number) => formatNumber(powerFactorAt(sweep, share), { decimals: 2 });
  const { low, high } = endsOf(sweep);
  return sweepWords(sweep, id, nameOf, {
    throughout: `at every average power factor from ${factorAt(low)} to ${factorAt(high)}`,
    place: (share) => `an average power factor of ${factorAt(share)}`,
    detail: (share) =>
      share >= 0
        ? `${formatPercent(share)} of today's lagging kvarh must go`
        : `${formatPercent(-share)} more lagging kvarh than today`,
    unit: factorAt,
  });
}

/** Where they cost the same as the whole load grows or shrinks. */
export function factorWords(sweep: CompareSweep, id: string, nameOf: Names, kwh: number): string {
  const times = (factor: number) => `${formatNumber(factor, { decimals: 2 })} times`;
  const { low, high } = endsOf(sweep);
  return sweepWords(sweep, id, nameOf, {
    throughout: `from ${times(low)} to ${times(high)} today's load`,
    place: (factor) => `${times(factor)} today's load`,
    detail: (factor) => `${formatNumber(kwh * factor)} kWh a year`,
    unit: times,
  });
}

interface Speech {
  throughout: string;
  place: (at: number) => string;
  detail: (at: number) => string;
  unit: (at: number) => string;
}

const endsOf = ({ points }: CompareSweep) => ({ low: points[0]!.place, high: points.at(-1)!.place });

function powerFactorAt({ points }: CompareSweep, share: number): number {
  // kvarh per kWh falls in a straight line with the share.
  const { low, high } = endsOf({ points } as CompareSweep);
  const ratio = (factor: number) => Math.tan(Math.acos(Math.min(1, factor)));
  const [first, last] = [ratio(points[0]!.powerFactor), ratio(points.at(-1)!.powerFactor)];
  return Math.cos(Math.atan(first + ((last - first) * (share - low)) / (high - low)));
}

function sweepWords(sweep: CompareSweep, id: string, nameOf: Names, speech: Speech): string {
  const found = sweep.pairs.find((pair) => pair.id === id)!.found;
  const [standing, other] = [nameOf(sweep.ids[0]!), nameOf(id)];
  const cheaper = ({ cheaper: side }: CheaperStretch) => (side === 'first' ? standing : other);
  const { stretches } = found;
  const [only] = stretches;
  if (stretches.length === 1) {
    return only!.cheaper === 'neither'
      ? `${standing} and ${other} cost the same ${speech.throughout}.`
      : `${cheaper(only!)} is cheaper ${speech.throughout}.`;
  }
  const [first] = found.breakEvens;
  if (found.breakEvens.length === 1 && !stretches.some((stretch) => stretch.cheaper === 'neither')) {
    const { at, isJump } = first!;
    const [below, above] = stretches as [CheaperStretch, CheaperStretch];
    const dearer = `below it ${nameOfOther(below, standing, other)} is dearer, above it ${nameOfOther(above, standing, other)}`;
    return isJump
      ? `At ${speech.place(at)} (${speech.detail(at)}) the costs jump past one another and never meet; ${dearer}.`
      : `The two cost the same at ${speech.place(at)} (${speech.detail(at)}); ${dearer}.`;
  }
  return manyWords(stretches, cheaper, speech);
}

const nameOfOther = ({ cheaper }: CheaperStretch, standing: string, other: string) =>
  cheaper === 'first' ? other : standing;

function manyWords(stretches: CheaperStretch[], cheaper: (stretch: CheaperStretch) => string, speech: Speech): string {
  const changes = stretches.length - 1;
  const listed = stretches.slice(0, mostListed + 1).map((stretch, index) => {
    const what = stretch.cheaper === 'neither' ? 'both the same' : cheaper(stretch);
    const place =
      index === 0
        ? `up to ${speech.unit(stretch.to)}`
        : index === changes
          ? `from ${speech.unit(stretch.from)} on`
          : `from ${speech.unit(stretch.from)} to ${speech.unit(stretch.to)}`;
    return `${what} ${place}`;
  });
  const more = changes > mostListed ? ` ${capital(formatSpelled(changes - mostListed))} more changes follow.` : '';
  const times = changes === 1 ? 'once' : changes === 2 ? 'twice' : `${formatSpelled(changes)} times`;
  return `Which is cheaper changes ${times}: ${listed.join(', ')}.${more}`;
}
