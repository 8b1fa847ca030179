import { judgePlans, searchSettings, sizeCapacitors } from '../../core/plan';
import type { Alternative, CapacitorSizing, SearchInput, SearchResult } from '../../core/plan';
import { wordMoney, wordNumber } from '../../core/units';
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
  const motor: Alternative = { kind: 'motor', name: 'The field settings', yearCost: found.cost, capitalCost: 0 };
  if (!bank)
    return { alternatives: [], bank: null, ...verdictOf(ready, found.standingCost, found.leaveAlone ? [] : [motor]) };
  const yearly = yearlyCostPerKvar(bank);
  const { stepKvar, lossWPerKvar, holdsPowerFactor, mostSteps } = bank;
  const alone = sizeCapacitors({
    plant: ready.plant,
    step: { stepKvar, lossWPerKvar },
    mostSteps,
    holdsPowerFactor,
    totals: input.totals,
    yearlyCostPerKvar: yearly,
    shortCircuitKva: ready.plant.supply?.shortCircuitKva,
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
  const alternatives = [
    motor,
    ofBank('capacitors', 'Capacitors alone', alone.best.billCost, alone.best.steps, bank),
    ofBank('both', 'Both together', together.cost - together.bankCost, together.bankSteps, bank),
  ].filter((one) => one.kind === 'motor' || one.capitalCost > 0 || bank.costPerKvar === 0);
  return {
    alternatives: viewsOf(ready, found, alternatives, { alone, together }),
    bank: {
      stepKvar,
      lossWPerKvar,
      holdsPowerFactor,
      aloneSteps: alone.best.steps,
      aloneSwitched: alone.best.switched,
      togetherSteps: together.bankSteps,
      resonance: alone.best.resonance,
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
  kind: 'capacitors' | 'both',
  name: string,
  yearCost: number,
  steps: number,
  bank: SearchedBankInput,
): Alternative {
  const capitalCost = steps * bank.stepKvar * bank.costPerKvar;
  return { kind, name, yearCost, capitalCost, yearlyUpkeep: upkeepShare * capitalCost };
}

const judged = (ready: ReadyYear, standingCost: number, alternatives: Alternative[]) =>
  judgePlans({
    standingCost,
    alternatives,
    years: planDefaults.horizonYears,
    discountRate: planDefaults.discountPercent / 100,
    escalationRate: planDefaults.escalationPercent / 100,
    wordMoney: (amount) => wordMoney(Math.round(amount), ready.schedule.currency),
  });

const verdictOf = (ready: ReadyYear, standingCost: number, alternatives: Alternative[]) => ({
  verdict: judged(ready, standingCost, alternatives).words,
});

function viewsOf(
  ready: ReadyYear,
  found: SearchResult,
  alternatives: Alternative[],
  { alone, together }: { alone: CapacitorSizing; together: SearchResult },
): AlternativeView[] {
  const bankWords = (steps: number, switched: boolean) =>
    `${wordNumber(steps, 1)} ${switched ? 'switched' : 'fixed'} ${steps === 1 ? 'step' : 'steps'}`;
  const words: Record<Alternative['kind'], string> = {
    motor: found.leaveAlone ? 'the fields of today' : 'the fields as found',
    capacitors: bankWords(alone.best.steps, alone.best.switched),
    both: `${bankWords(together.bankSteps, alone.best.switched)} with fields of their own best`,
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
