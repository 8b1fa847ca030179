import { place, unlessFault, type Evaluate } from '../formula/compile';
import { excess, hypot2, powerFactorOf, ratioOf } from '../formula/functions';
import type { CellBlock } from './cell-block';

/** One step of a formula over a block's cells. */
export interface Column {
  /** Results, once filled. float64[cells of the block or more] */
  out: Float64Array;
  /** Works the step out; false where it has no value in some cell. */
  fill(values: Float64Array): boolean;
}

/** Where a step puts its results: a room of the block. It may be its first operand's, which is read cell by cell before. */
export interface StepRoom {
  block: CellBlock;
  room: number;
}

type Work = (out: Float64Array, count: number, values: Float64Array) => boolean | void;

function step({ block, room }: StepRoom, inputs: Column[], work: Work): Column {
  return {
    out: block.rooms[room]!,
    fill(values) {
      for (let i = 0; i < inputs.length; i++) if (!inputs[i]!.fill(values)) return false;
      this.out = block.rooms[room]!;
      return work(this.out, block.count, values) !== false;
    },
  };
}

/** A register of the cells as it is. */
export function registerColumn(block: CellBlock, register: 'kwh' | 'kvarhLagging' | 'kvarhLeading'): Column {
  return {
    out: block[register],
    fill() {
      this.out = block[register];
      return true;
    },
  };
}

/** A step that always has a value and that several formulas take: worked out once in each block, in a room of its own. */
export function sharedColumn(block: CellBlock, column: Column): Column {
  let serial = -1;
  return {
    out: column.out,
    fill(values) {
      if (serial === block.serial) return true;
      serial = block.serial;
      column.fill(values);
      this.out = column.out;
      return true;
    },
  };
}

/** What is the same in every cell. */
export function constantColumn(room: StepRoom, evaluate: Evaluate): Column {
  return step(room, [], (out, count, values) => {
    const value = unlessFault(() => evaluate(values));
    if (value !== undefined) out.fill(value, 0, count);
    return value !== undefined;
  });
}

/** A function of one value. */
export function mapped(room: StepRoom, a: Column, work: (a: number) => number): Column {
  return step(room, [a], (out, count) => {
    const x = a.out;
    for (let i = 0; i < count; i++) out[i] = work(x[i]!);
  });
}

/** A function of two values. */
export function zipped(room: StepRoom, a: Column, b: Column, work: (a: number, b: number) => number): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) out[i] = work(x[i]!, y[i]!);
  });
}

/** A function of three values. */
export function chosen(
  room: StepRoom,
  [a, b, c]: readonly [Column, Column, Column],
  work: (a: number, b: number, c: number) => number,
): Column {
  return step(room, [a, b, c], (out, count) => {
    const x = a.out;
    const y = b.out;
    const z = c.out;
    for (let i = 0; i < count; i++) out[i] = work(x[i]!, y[i]!, z[i]!);
  });
}

/** The values themselves, as long as each passes a test. */
export function tested(room: StepRoom, a: Column, test: (a: number) => boolean): Column {
  return step(room, [a], (out, count) => {
    const x = a.out;
    for (let i = 0; i < count; i++) {
      const value = x[i]!;
      if (!test(value)) return false;
      out[i] = value;
    }
    return true;
  });
}

// Frequent steps have a loop of their own: one loop that is given its step as a function calls it for every cell.

/** a + b */
export function plus(room: StepRoom, a: Column, b: Column): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) out[i] = x[i]! + y[i]!;
  });
}

/** a - b */
export function minus(room: StepRoom, a: Column, b: Column): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) out[i] = x[i]! - y[i]!;
  });
}

/** a x b */
export function times(room: StepRoom, a: Column, b: Column): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) out[i] = x[i]! * y[i]!;
  });
}

/** a / b */
export function divided(room: StepRoom, a: Column, b: Column): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) {
      const divisor = y[i]!;
      if (divisor === 0) return false;
      out[i] = x[i]! / divisor;
    }
    return true;
  });
}

/** Power of an energy: over the cells' hours. A cell without hours holds nothing and is passed over. */
export function overHours(room: StepRoom, energy: Column): Column {
  const { block } = room;
  const divided = step(room, [energy], (out, count) => {
    const x = energy.out;
    const { hours } = block;
    for (let i = 0; i < count; i++) out[i] = x[i]! / hours[i]!;
  });
  return {
    out: divided.out,
    fill(values) {
      // Over whole hours a power is its energy.
      const column = block.evenHours === 1 ? energy : divided;
      const isSure = column.fill(values);
      this.out = column.out;
      return isSure;
    },
  };
}

/** Length of the vector of two values. */
export function lengths(room: StepRoom, a: Column, b: Column): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) out[i] = hypot2(x[i]!, y[i]!);
  });
}

/** excess(a; b) */
export function exceeding(room: StepRoom, a: Column, b: Column): Column {
  return step(room, [a, b], (out, count) => {
    const x = a.out;
    const y = b.out;
    for (let i = 0; i < count; i++) out[i] = excess(x[i]!, y[i]!);
  });
}

/** pf(active; reactive) */
export function powerFactors(room: StepRoom, active: Column, reactive: Column): Column {
  return step(room, [active, reactive], (out, count, values) => {
    const x = active.out;
    const y = reactive.out;
    const zeroRule = values[place.zeroPf]!;
    for (let i = 0; i < count; i++) out[i] = powerFactorOf(x[i]!, y[i]!, zeroRule);
  });
}

/** ratio(reactive; active) */
export function ratios(room: StepRoom, reactive: Column, active: Column): Column {
  return step(room, [reactive, active], (out, count, values) => {
    const x = reactive.out;
    const y = active.out;
    const zeroRule = values[place.zeroRatio]!;
    for (let i = 0; i < count; i++) out[i] = ratioOf(x[i]!, y[i]!, zeroRule);
  });
}
