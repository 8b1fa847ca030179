import type {
  ContractInput,
  DemandWindow,
  HolidayRule,
  QuantityEntry,
  RateEntry,
  ScheduleText,
  SeasonTable,
  WindowEntry,
  ChargeEntry,
} from '../model';
import type { Rounding } from '../../units';
import type { ExpressionReader } from './expressions';
import type { Problems } from './problems';
import type { Scope } from './scope';

/** What the readers of one text share while they fill it. */
export interface TextContext {
  scope: Scope;
  problems: Problems;
  reader: ExpressionReader;
  currency: string;
  seasons?: SeasonTable;
  windows: Map<string, WindowEntry>;
  holidays: HolidayRule;
  demandWindow?: DemandWindow;
  rounding: Rounding;
  zeroKwh: ScheduleText['zeroKwh'];
  contract: ContractInput[];
  rates: RateEntry[];
  quantities: QuantityEntry[];
  charges: ChargeEntry[];
  usedWindows: Set<string>;
  notes: { path: string; message: string }[];
}
