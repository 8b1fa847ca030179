import { NotConvergedError, PullOutError } from '../../core/machine';
import { PriceError, ScheduleError } from '../../core/tariff';
import { priceYear } from './price-year';
import { searchYear } from './search-year';
import type { Refused, SearchResult, SearchTask, TaskSetting, YearTask } from './tasks';

/** Errors whose words a person can act on; any other is a fault of the program. */
const tellable = [PriceError, ScheduleError, PullOutError, NotConvergedError];

/**
 * The work of a calculation thread. Its program carries no database and no environment. Between threads an error keeps
 * its words but not its class, so one that a person can act on comes back as a result.
 */
export default function calculate(task: YearTask | SearchTask): TaskSetting[] | SearchResult | Refused {
  try {
    return task.kind === 'year' ? priceYear(task) : searchYear(task);
  } catch (error) {
    if (error instanceof Error && tellable.some((kind) => error instanceof kind)) return { refused: error.message };
    throw error;
  }
}
