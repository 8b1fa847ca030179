/** How far the year's saving moves while one assumed value of a motor goes over its typical range. */
export interface SavingSwing {
  motorId: number;
  /** Path in the machine, as in `AssumedValue`. */
  field: string;
  /** Saving of the year at the low and the high end, in minor units; null where the plan cannot run there. */
  atLowMinor: number | null;
  atHighMinor: number | null;
}

/** A plan's saving with every assumed value moved, each alone. */
export interface AssumedSaving {
  planName: string;
  currency: string;
  /** Saving of the year with the values as assumed, in minor units. */
  savingMinor: number;
  swings: SavingSwing[];
  /** What it was worked out from; of anything else it is out of date. */
  fingerprint: string;
}

/** Where that work stands as a page opens. */
export interface AssumedSavingState {
  /** The plan whose saving is asked for; null where there is none yet. */
  planName: string | null;
  /** The job, while it runs. */
  runningId: number | null;
  found: AssumedSaving | null;
  /** Something was found, but of other motors, bills, tariff or plan. */
  stale: boolean;
}
