import { judgePlans, searchSettings, sizeCapacitors } from '../../core/plan';
import type { Alternative, CapacitorSize, CapacitorSizing, SearchInput, SearchResult } from '../../core/plan';
import { wordNumber } from '../../core/units';
import { planDefaults } from '../../schemas/plan-money';
import type { AlternativeView, SearchView, SearchedBankInput } from '../../schemas/search';
import type { ReadyYear } from './price-year';
import type { SearchTask } from './tasks';

/** What a kvar costs a year in upkeep, as a share of its price. Common practice. */
const upkeepShare = 0.02;

type Weighed = Pick<SearchView, 'alternatives' | 'bank' | 'verdict'>;

interface Weighing {
  ready: ReadyYear;
  input: SearchInput;
  found: SearchResult;
  asked: SearchTask['asked'];
  tell: (done: number, planned: number) => void;
}

/** Weighs the fields against capacitors, and both together, by present value over the usual years. */
export function weighCapacitors(weighing: Weighing): Weighed {
  const { ready, input, found, asked, tell } = weighing;
  const { bank } = asked;
  const motorWork = bank?.motorWork ?? 0;
  const motor: Alternative = {
    kind: 'motor',
    name: 'The field settings',
    yearCost: found.cost,
    capitalCost: found.leaveAlone ? 0 : motorWork,
  };
  if (!bank)
    return { alternatives: [], bank: null, ...verdictOf(ready, found.standingCost, found.leaveAlone ? [] : [motor]) };
  const yearly = yearlyCostPerKvar(bank);
  const { stepKvar, lossWPerKvar, holdsPowerFactor, mostSteps, detuningPercent } = bank;
  const alone = sizeCapacitors({
    plant: ready.plant,
    step: { stepKvar, lossWPerKvar },
    mostSteps,
    holdsPowerFactor,
    totals: input.totals,
    yearlyCostPerKvar: yearly,
    shortCircuitKva: ready.plant.supply?.shortCircuitKva,
    detuningPercent,
    onProgress: ({ priced, planned }) => tell(priced, planned),
  });
  const together = searchSettings({
    ...input,
    bank: {
      stepKvar,
      lossWPerKvar,
      mostSteps,
      yearlyCostPerStep: yearly * stepKvar,
      ...(alone.best.switched && { holdsPowerFactor }),
    },
    onProgress: ({ priced, planned }) => tell(priced, planned),
  });
  const sizes = { alone: bestBankAlone(alone), together: bestBankTogether(together, yearly * stepKvar) };
  const alternatives = [
    motor,
    ofBank({ kind: 'capacitors', name: 'Capacitors alone' }, sizes.alone, bank, 0),
    ofBank({ kind: 'both', name: 'Both together' }, sizes.together, bank, motorWork),
  ];
  return {
    alternatives: viewsOf(ready, found, alternatives, sizes),
    bank: {
      stepKvar,
      lossWPerKvar,
      holdsPowerFactor,
      aloneSteps: sizes.alone.steps,
      aloneSwitched: sizes.alone.switched,
      togetherSteps: together.bankSteps,
      resonance: sizes.alone.resonance,
    },
    verdict: verdictOf(ready, found.standingCost, alternatives).verdict,
  };
}

/** Capital spread over the usual years at the usual rate, and upkeep. [currency/kvar/yr] */
function yearlyCostPerKvar({ costPerKvar }: SearchedBankInput): number {
  const rate = planDefaults.discountPercent / 100;
  const annuity = (1 - (1 + rate) ** -planDefaults.horizonYears) / rate;
  return costPerKvar * (1 / annuity + upkeepShare);
}

function ofBank(
  what: Pick<Alternative, 'kind' | 'name'>,
  { billCost, steps }: Pick<CapacitorSize, 'billCost' | 'steps'>,
  { stepKvar, costPerKvar }: SearchedBankInput,
  motorWork: number,
): Alternative {
  const bankCost = steps * stepKvar * costPerKvar;
  return { ...what, yearCost: billCost, capitalCost: bankCost + motorWork, yearlyUpkeep: upkeepShare * bankCost };
}

const judged = (ready: ReadyYear, standingCost: number, alternatives: Alternative[]) =>
  judgePlans({
    standingCost,
    alternatives,
    years: planDefaults.horizonYears,
    discountRate: planDefaults.discountPercent / 100,
    escalationRate: planDefaults.escalationPercent / 100,
    wordMoney: (amount) => `${wordNumber(amount, 1)} ${ready.schedule.currency}`,
  });

const verdictOf = (ready: ReadyYear, standingCost: number, alternatives: Alternative[]) => ({
  verdict: judged(ready, standingCost, alternatives).words,
});

/** The best size of a bank that is there at all: none is what leaving the plant alone stands for. */
function bestBankAlone({ sizes }: CapacitorSizing): CapacitorSize {
  return sizes.filter(({ steps }) => steps > 0).reduce((a, b) => (b.yearCost < a.yearCost ? b : a));
}

/** The best number of steps beside the fields, one at least; its bills without the bank's own cost. */
function bestBankTogether({ bankCurve }: SearchResult, yearlyCostPerStep: number): { steps: number; billCost: number } {
  const [best] = bankCurve.filter(({ steps }) => steps > 0).sort((a, b) => a.cost - b.cost);
  return { steps: best!.steps, billCost: best!.cost - best!.steps * yearlyCostPerStep };
}

function viewsOf(
  ready: ReadyYear,
  found: SearchResult,
  alternatives: Alternative[],
  { alone, together }: { alone: CapacitorSize; together: { steps: number } },
): AlternativeView[] {
  const bankWords = (steps: number) =>
    `${wordNumber(steps, 1)} ${alone.switched ? 'switched' : 'fixed'} ${steps === 1 ? 'step' : 'steps'}`;
  const words: Record<Alternative['kind'], string> = {
    motor: found.leaveAlone ? 'the fields of today' : 'the fields as found',
    capacitors: bankWords(alone.steps),
    both: `${bankWords(together.steps)} beside the fields`,
  };
  return judged(ready, found.standingCost, alternatives).judged.map(
    ({ kind, name, yearCost, capitalCost, yearlyUpkeep = 0, appraisal }) => ({
      kind,
      name,
      words: words[kind],
      yearTotal: yearCost,
      capitalCost,
      yearlyUpkeep,
      npv: appraisal.npv,
    }),
  );
}
