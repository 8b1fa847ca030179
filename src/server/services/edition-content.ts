import type {
  EditionBill,
  EditionContent,
  EditionFinding,
  EditionMotor,
  EditionPlan,
  EditionSource,
} from '../../schemas/edition';
import type { MotorView } from '../../schemas/motor';
import type { PricedBillView, PlanView, YearView } from '../../schemas/plan';
import { constantFieldA } from '../../schemas/plan-settings';
import type { PricedYear } from '../../schemas/pricing';
import { formatNumber } from '../../components/ui/format';
import { settingValueWords } from '../../components/ui/setting-words';
import { fromMinorUnits } from '../../core/units';
import { Intake } from '../models/Intake';
import { Practice } from '../models/Practice';
import type { Actor } from '../policies/actor';
import type { OpenEngagement } from './engagements';

/** What an edition is made of, gathered once so that all its parts agree. */
export interface EditionBasis {
  opened: OpenEngagement;
  year: YearView;
  plan: PlanView;
  priced: PricedYear;
  motors: MotorView[];
  schedule: { title: string; sha256: string };
}

function editionPlan(plan: PlanView): EditionPlan {
  const {
    name,
    spans,
    fields,
    banks,
    replacements,
    yearTotal,
    saving,
    reactiveCost,
    groupTotals,
    capitalCost,
    yearlyUpkeep,
  } = plan;
  const { economics, appraisal, paybackWords, paybackSpread, nearestLimit, extraLossKwh, hoursLeading, worstPf } = plan;
  return {
    name,
    spans,
    fields,
    banks,
    replacements,
    yearTotal,
    saving,
    reactiveCost,
    groupTotals,
    capitalCost,
    yearlyUpkeep,
    economics,
    appraisal,
    paybackWords,
    paybackSpread,
    nearestLimit,
    extraLossKwh,
    hoursLeading: hoursLeading.after,
    worstPf: worstPf?.value ?? null,
  };
}

function editionBill(
  before: PricedBillView,
  after: PricedBillView,
  billedMinor: number | null,
  currency: string,
): EditionBill {
  const afterLines = new Map(after.lines.map((line) => [line.id, line]));
  return {
    from: before.from,
    to: before.to,
    before: before.total,
    after: after.total,
    billed: billedMinor === null ? null : fromMinorUnits(billedMinor, currency),
    reactiveCost: before.reactiveCost,
    reactiveCostAfter: after.reactiveCost,
    lines: before.lines.map(({ id, label, group, amount }) => ({
      id,
      label,
      group,
      before: amount,
      after: afterLines.get(id)?.amount ?? 0,
    })),
  };
}

function editionFindings(priced: PricedYear): EditionFinding[] {
  const bills = new Map(priced.bills.map((one) => [one.bill.id, one.bill]));
  return priced.findings.map(({ letter, title, sentence, billId, amountMinor }) => ({
    letter,
    title,
    sentence,
    billFrom: bills.get(billId)?.from ?? '',
    billTo: bills.get(billId)?.to ?? '',
    amountMinor,
  }));
}

function editionMotors(plan: PlanView, motors: MotorView[]): EditionMotor[] {
  return motors.flatMap((motor) => {
    const planned = plan.motors.find((one) => one.motorId === motor.id);
    if (!planned) return [];
    const field = plan.fields.find((one) => one.motorId === motor.id);
    return {
      motorId: motor.id,
      name: motor.name,
      drives: motor.drives,
      rated: `${formatNumber(motor.plate.output, { upTo: 1 })} ${motor.plate.outputUnit}, ${formatNumber(motor.plate.voltageV)} V, ${formatNumber(motor.plate.powerFactor, { decimals: 2 })} leading`,
      fieldTodayA: motor.fieldTodayA,
      fieldPlanA: planned.fieldPlanA,
      ...(field && constantFieldA(field) === null ? { setting: settingValueWords(field, plan.spans) } : {}),
      fieldLimitA: planned.fieldLimitA,
      fieldRatedA: motor.machine.ratedFieldCurrentA,
      armatureTodayA: planned.armatureTodayA,
      armaturePlanA: planned.armaturePlanA,
      armatureRatedA: motor.ratedCurrentA,
      kvarToday: planned.kvarToday,
      kvarPlan: planned.kvarPlan,
      usualLoadPercent: planned.usualLoadPercent,
      leastPullOut: planned.leastPullOut,
      pullOutMargin: planned.pullOutMargin,
      extraLossKwh: planned.extraLossKwh,
      hoursRunning: planned.hoursRunning,
    };
  });
}

async function editionSources(engagementId: number): Promise<EditionSource[]> {
  const intakes = await Intake.findAll({ where: { engagementId, state: 'kept' }, order: ['id'] });
  return intakes.map(({ fileName, kind, sha256, keptAt, updatedAt }) => ({
    fileName,
    kind,
    sha256,
    keptAt: (keptAt ?? updatedAt).toISOString(),
  }));
}

/** Gathers everything an edition says. Nothing in it is read again once it is frozen. */
export async function editionContent(actor: Actor, basis: EditionBasis, number: number): Promise<EditionContent> {
  const { opened, year, plan, priced, motors, schedule } = basis;
  const { engagement, client, site, meter } = opened;
  const [practice, sources] = await Promise.all([Practice.findOne(), editionSources(engagement.id)]);
  return {
    number,
    madeOn: new Date().toISOString().slice(0, 10),
    currency: year.currency,
    practice: { name: practice?.name ?? '', phone: practice?.phone ?? '' },
    by: actor.name,
    client: client.name,
    site: { name: site.name, place: site.place, timeZone: site.timeZone },
    meter: meter.label,
    schedule,
    year: { from: year.from, to: year.to },
    readings: year.readings,
    standing: editionPlan(year.standing),
    plan: editionPlan(plan),
    others: year.plans.filter((other) => other.id !== plan.id).map(editionPlan),
    bills: year.standing.bills.map((before, index) =>
      editionBill(before, plan.bills[index] as PricedBillView, priced.bills[index]?.billedMinor ?? null, year.currency),
    ),
    findings: editionFindings(priced),
    billsIncomplete: priced.bills.filter((bill) => bill.missingReadings > 0).length,
    motors: editionMotors(plan, motors),
    assumed: plan.assumed,
    cashFlow: plan.cashFlow,
    money: plan.money,
    sources,
    notes: [...year.gaps, ...year.notes],
  };
}
