import { priceYear } from './price-year';
import { searchYear } from './search-year';
import type { SearchTask, YearTask } from './tasks';

/** The work of a calculation thread. Its program carries no database and no environment. */
export default function calculate(task: YearTask | SearchTask): unknown {
  return task.kind === 'year' ? priceYear(task) : searchYear(task);
}
