import type { PlanMoney } from '../../schemas/assumptions';
import { calculateCash } from '../workers/pool';
import type { CashFlowParts } from '../workers/tasks';
import { remembered, type Memory } from './remembered';

const shared = globalThis as typeof globalThis & { counterlagCash?: Memory<CashFlowParts> };

/** Cash flows of plans, in the order asked; each is sampled once as long as nothing in it changes. */
export function cashFlowsOf(plans: PlanMoney[]): Promise<CashFlowParts[]> {
  const kept = { memory: (shared.counterlagCash ??= new Map()), size: 60 };
  return remembered(kept, plans, (money) => JSON.stringify(money), calculateCash);
}
