import { NotConvergedError, PullOutError } from '../../core/machine';
import { PriceError, readSchedule, ScheduleError } from '../../core/tariff';
import type { CompareResult } from '../../schemas/compare';
import type { PricedYear } from '../../schemas/pricing';
import { reconcileYear } from '../services/reconcile';
import { compareYear } from './compare-year';
import { estimateYear } from './estimate-year';
import { planCashFlow } from '../services/plan-economics';
import { priceText } from './price-text';
import { priceYear } from './price-year';
import { searchYear } from './search-year';
import type { CashFlowParts, EstimateResult, Refused, SearchResult, Task, TaskSetting, TextResult } from './tasks';

type Done = CashFlowParts[] | EstimateResult | TaskSetting[] | SearchResult | TextResult | CompareResult | PricedYear;

/** Errors whose words a person can act on; any other is a fault of the program. */
const tellable = [PriceError, ScheduleError, PullOutError, NotConvergedError];

/**
 * The work of a calculation thread. Its program carries no database and no environment. Between threads an error keeps
 * its words but not its class, so one that a person can act on comes back as a result.
 */
export default function calculate(task: Task): Done | Refused {
  try {
    return doneOf(task);
  } catch (error) {
    if (error instanceof Error && tellable.some((kind) => error instanceof kind)) return { refused: error.message };
    throw error;
  }
}

function doneOf(task: Task): Done {
  switch (task.kind) {
    case 'cash':
      return task.plans.map(planCashFlow);
    case 'estimate':
      return estimateYear(task);
    case 'year':
      return priceYear(task);
    case 'search':
      return searchYear(task);
    case 'text':
      return priceText(task);
    case 'compare':
      return compareYear(task);
    case 'reconcile':
      return reconcileYear({ ...task.basis, schedule: readSchedule(task.basis.scheduleText) });
  }
}
