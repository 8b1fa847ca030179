import type { LoadSeries } from '../load';

/** What a plan changes in every interval of the even load, and what the motors take there as they stand. */
export interface PlannedChange {
  hours: number;
  before: LoadSeries;
  after: LoadSeries;
  /** More drawn, and more absorbed: less where it is negative. [kWh], [kvarh] per interval */
  moreKwh: Float64Array;
  moreKvarh: Float64Array;
  /** Drawn and absorbed by the motors as they stand. [kW], [kvar] */
  standingKw: Float64Array;
  standingKvar: Float64Array;
}

/** A way the plant may be at some moment. */
export interface MomentChange {
  moreKw: number;
  moreKvar: number;
  standingKw: number;
  /** Least reactive power the plant then draws as it stands: that of its motors. [kvar] */
  standingKvar: number;
  intervals: number;
}

/** What a plan changes over the intervals of one measure. */
export interface ChangeOver {
  moreKwh: number;
  /** Delivered and absorbed more, apart. [kvarh] */
  delivered: number;
  absorbed: number;
  /** Of what is delivered, what surely meets reactive energy that is drawn: the motors' own. [kvarh] */
  surelyMet: number;
  /** The same in the even load, register by register, as changed there. [kvarh] */
  evenLagging: number;
  evenLeading: number;
  evenKvah: number;
  /** Most that kVAh can change by: the length of the change in each interval. */
  mostKvah: number;
  moments: MomentChange[];
}

/** Adds a plan's change up over some intervals. */
export function changeOver(change: PlannedChange, intervals: Int32Array): ChangeOver {
  const { before, after, moreKwh, moreKvarh, standingKvar, hours } = change;
  const over: ChangeOver = {
    moreKwh: 0,
    delivered: 0,
    absorbed: 0,
    surelyMet: 0,
    evenLagging: 0,
    evenLeading: 0,
    evenKvah: 0,
    mostKvah: 0,
    moments: momentsOf(change, intervals),
  };
  for (const i of intervals) {
    const kvarh = moreKvarh[i]!;
    over.moreKwh += moreKwh[i]!;
    if (kvarh < 0) {
      over.delivered -= kvarh;
      over.surelyMet += Math.min(-kvarh, Math.max(0, standingKvar[i]! * hours));
    } else over.absorbed += kvarh;
    over.evenLagging += after.kvarhLagging[i]! - before.kvarhLagging[i]!;
    over.evenLeading += after.kvarhLeading[i]! - before.kvarhLeading[i]!;
    over.evenKvah += kvahOf(after, i) - kvahOf(before, i);
    over.mostKvah += Math.hypot(moreKwh[i]!, kvarh);
  }
  return over;
}

function kvahOf({ kwh, kvarhLagging, kvarhLeading }: LoadSeries, i: number): number {
  return Math.hypot(kwh[i]!, kvarhLagging[i]! - kvarhLeading[i]!);
}

function momentsOf(change: PlannedChange, intervals: Int32Array): MomentChange[] {
  const { moreKwh, moreKvarh, standingKw, standingKvar, hours } = change;
  const moments = new Map<string, MomentChange>();
  for (const i of intervals) {
    const moment = {
      moreKw: moreKwh[i]! / hours,
      moreKvar: moreKvarh[i]! / hours,
      standingKw: standingKw[i]!,
      standingKvar: standingKvar[i]!,
    };
    const key = Object.values(moment)
      .map((value) => value.toPrecision(9))
      .join();
    const found = moments.get(key);
    if (found) found.intervals++;
    else moments.set(key, { ...moment, intervals: 1 });
  }
  return [...moments.values()];
}
