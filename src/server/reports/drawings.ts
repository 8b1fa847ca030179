import type { PaybackData } from '../../components/charts/payback';
import { vCurveData } from '../../components/motors/curves';
import { paybackRange } from '../../components/plans/chart-data';
import { poorFactorBars } from '../../components/report/poor-factor-bars';
import type { EditionContent } from '../../schemas/edition';
import type { MotorView } from '../../schemas/motor';
import type { Drawing } from './draw';

const leafWidth = 592;
const letterWidth = 552;
const sharp = 2;

/** The payback picture of an edition. */
export function paybackData({ cashFlow, plan, currency, number }: EditionContent): PaybackData {
  return {
    currency,
    capitalCost: plan.capitalCost,
    incentive: plan.economics.incentive,
    points: cashFlow.map(({ month, cumulative, low, high }) => ({ year: month / 12, cumulative, p10: low, p90: high })),
    paybackYears: plan.appraisal.simplePaybackYears,
    paybackRange: paybackRange(plan),
    editionName: `edition ${number}`,
  };
}

function paybackDrawings(content: EditionContent): Drawing[] {
  const data = paybackData(content);
  const letter = { width: letterWidth, height: 330 };
  const pngWidth = sharp * letterWidth;
  return [
    { name: 'payback-page', chart: 'payback', props: { ...data, width: leafWidth, height: 340, palette: 'page' } },
    {
      name: 'payback',
      chart: 'payback',
      props: { ...data, ...letter, palette: 'light' },
      pngWidth,
      background: '#FFFDF8',
    },
    {
      name: 'payback-dark',
      chart: 'payback',
      props: { ...data, ...letter, palette: 'dark' },
      pngWidth,
      background: '#1C2327',
    },
  ];
}

function billsDrawing(content: EditionContent): Drawing {
  const size = { width: 410, height: 190, palette: 'page' as const };
  return { name: 'bills', chart: 'bills', props: { ...poorFactorBars(content), ...size } };
}

function vCurveDrawings({ motors, plan }: EditionContent, views: MotorView[]): Drawing[] {
  return motors.flatMap((motor) => {
    const view = views.find((one) => one.id === motor.motorId);
    if (!view) return [];
    const data = vCurveData(view, { name: plan.name, fieldA: motor.fieldPlanA });
    const size = { width: 410, height: 206, palette: 'page' as const };
    return { name: `v-curve-${motor.motorId}`, chart: 'v-curve' as const, props: { ...data, ...size } };
  });
}

/** Every picture of an edition: for its pages by the page's own colours, for the letter in light and dark. */
export function editionDrawings(content: EditionContent, motors: MotorView[]): Drawing[] {
  return [...paybackDrawings(content), billsDrawing(content), ...vCurveDrawings(content, motors)];
}
