import { layCells, type CellGround, type CellPlan } from '../calendar/cells';
import { positionsInside } from '../calendar/period-calendar';
import { channelOf } from '../channels';
import type { MeasureDefinition, QuantityEntry } from '../model';
import type { PricingGrid } from '../types';
import type { ClassPlan } from './class-loops';
import type { PeriodPlan } from './period-plan';
import type { TextPlan } from './text-plan';

/** How a measure is gathered from intervals. */
export type MeasurePlan =
  | { kind: 'sum'; channel: 'kwh' | 'kvarhLagging' | 'kvarhLeading' | 'kvarhNet'; classes: Uint8Array }
  | { kind: 'peak'; channel: 'kw' | 'kva'; classes: Uint8Array }
  | { kind: 'cells'; cells: CellPlan };

/** Everything of one text in one period that does not depend on the load: classes, cells and how each measure uses them. */
export interface Reduction {
  classes: ClassPlan;
  cells: CellPlan[];
  /** By place of the quantity. */
  measures: ReadonlyMap<number, MeasurePlan>;
}

/** Lays out the gathering of one text's measures in one period. */
export function planReduction(text: TextPlan, plan: PeriodPlan, ground: CellGround, grid: PricingGrid): Reduction {
  const layout = new Layout(text, plan, ground, grid);
  const measures = new Map<number, MeasurePlan>();
  const measured = text.text.quantities.flatMap((quantity) => {
    const { definition } = quantity;
    return definition.kind === 'measure' ? [{ quantity, definition }] : [];
  });
  const byClass = measured.filter(({ definition }) => isPlainSum(definition) || layout.isPeak(definition));
  const windows = [
    ...new Set(byClass.flatMap(({ definition }) => (definition.window === undefined ? [] : [definition.window]))),
  ];
  const { classOf, masks } = layout.classify(windows);
  for (const { quantity, definition } of measured) {
    const measure = layout.planMeasure(definition, windows, masks);
    measures.set(quantity.slot, measure);
    if (measure.kind === 'cells' && readsReactive(text, quantity, definition)) measure.cells.needsReactive = true;
  }
  const needs = needsOf(measures, measured);
  return { classes: layout.layRuns(classOf, masks.length, needs), cells: layout.cells, measures };
}

/** Whether a measure, or a value taken at its instant, reads reactive energy. */
function readsReactive({ text }: TextPlan, { name }: QuantityEntry, definition: MeasureDefinition): boolean {
  const atIt = text.quantities.flatMap((other) =>
    other.definition.kind === 'value' && other.definition.at === name ? [other.definition.expression] : [],
  );
  const expressions = [definition.expression, ...(definition.where ? [definition.where] : []), ...atIt];
  return expressions.some(({ channels }) =>
    channels.some((channel) => channelOf(channel).usesLagging || channelOf(channel).usesLeading),
  );
}

function isPlainSum({ operation, channel, each, where }: MeasureDefinition): boolean {
  return (
    operation === 'sum' && channel !== undefined && channel !== 'kvah' && where === undefined && each === undefined
  );
}

function needsOf(
  measures: ReadonlyMap<number, MeasurePlan>,
  measured: { quantity: QuantityEntry }[],
): ClassPlan['needs'] {
  const plans = measured.map(({ quantity }) => measures.get(quantity.slot)!);
  const has = (kind: string, test: (channel: string) => boolean): boolean =>
    plans.some((plan) => plan.kind === kind && 'channel' in plan && test(plan.channel));
  return {
    kwh: has('sum', (channel) => channel === 'kwh'),
    reactive: has('sum', (channel) => channel !== 'kwh'),
    kwPeak: has('peak', (channel) => channel === 'kw'),
    kvaPeak: has('peak', (channel) => channel === 'kva'),
  };
}

class Layout {
  readonly cells: CellPlan[] = [];
  private readonly cellsByKey = new Map<string, CellPlan>();
  private readonly insideByWindow = new Map<string, Uint8Array>();

  constructor(
    private readonly text: TextPlan,
    private readonly plan: PeriodPlan,
    private readonly ground: CellGround,
    private readonly grid: PricingGrid,
  ) {}

  /** Whether a highest kw or kva can be read off single intervals. */
  isPeak({ operation, channel, each, where, count }: MeasureDefinition): boolean {
    const isChannel = channel === 'kw' || channel === 'kva';
    const window = this.text.text.demandWindow;
    const { stepMinutes } = this.grid;
    const isShort = !window || window.minutes < stepMinutes || (window.minutes === stepMinutes && !window.everyMinutes);
    const isInterval = each === 'interval' || (each === 'demand window' && isShort);
    return operation === 'highest' && isChannel && isInterval && where === undefined && count === 1;
  }

  private inside(window: string): Uint8Array {
    let inside = this.insideByWindow.get(window);
    if (!inside) {
      inside = positionsInside(this.text.text, window, this.plan, this.ground.calendar, this.grid.stepMinutes);
      this.insideByWindow.set(window, inside);
    }
    return inside;
  }

  /** Class of every position: the combination of windows it lies in. */
  classify(windows: string[]): { classOf: Uint16Array; masks: number[] } {
    const { count } = this.ground.calendar;
    const classOf = new Uint16Array(count);
    const masks = [0];
    const known = new Map([[0, 0]]);
    const insides = windows.map((window) => this.inside(window));
    for (let position = 0; position < count; position++) {
      let mask = 0;
      for (let w = 0; w < insides.length; w++) if (insides[w]![position] === 1) mask |= 1 << w;
      let found = known.get(mask);
      if (found === undefined) {
        found = masks.push(mask) - 1;
        known.set(mask, found);
      }
      classOf[position] = found;
    }
    return { classOf, masks };
  }

  planMeasure(definition: MeasureDefinition, windows: string[], masks: number[]): MeasurePlan {
    const { channel, window } = definition;
    const bit = window === undefined ? -1 : windows.indexOf(window);
    const classes = Uint8Array.from(masks, (mask) => (window === undefined || (mask >> bit) & 1 ? 1 : 0));
    if (isPlainSum(definition)) return { kind: 'sum', channel: channel as 'kwh', classes };
    if (this.isPeak(definition)) return { kind: 'peak', channel: channel as 'kw' | 'kva', classes };
    return { kind: 'cells', cells: this.cellsOf(definition) };
  }

  private cellsOf({ each, window }: MeasureDefinition): CellPlan {
    const kind = each ?? 'interval';
    const key = `${kind}|${window ?? ''}`;
    let cells = this.cellsByKey.get(key);
    if (!cells) {
      cells = layCells(
        kind,
        this.ground,
        window === undefined ? null : this.inside(window),
        this.text.text.demandWindow,
      );
      this.cellsByKey.set(key, cells);
      this.cells.push(cells);
    }
    return cells;
  }

  layRuns(classOf: Uint16Array, classCount: number, needs: ClassPlan['needs']): ClassPlan {
    const { calendar, seriesCount, pieceEnds } = this.ground;
    const runs: number[][] = [];
    let piece = 0;
    const from = Math.max(0, -calendar.first);
    const to = Math.min(calendar.count, seriesCount - calendar.first);
    for (let position = from; position < to; position++) {
      while (position >= pieceEnds[piece]!) piece++;
      const last = runs[runs.length - 1];
      if (last && last[2] === classOf[position] && last[3] === piece) last[1] = calendar.first + position + 1;
      else runs.push([calendar.first + position, calendar.first + position + 1, classOf[position]!, piece]);
    }
    const column = (index: number): Int32Array => Int32Array.from(runs, (run) => run[index]!);
    const room = pieceEnds.length * classCount;
    return {
      classCount,
      pieceCount: pieceEnds.length,
      runFirst: column(0),
      runEnd: column(1),
      runClass: column(2),
      runPiece: column(3),
      kwh: new Float64Array(room),
      kvarhLagging: new Float64Array(room),
      kvarhLeading: new Float64Array(room),
      highestKwh: new Float64Array(classCount),
      highestKwhAt: new Int32Array(classCount),
      highestSquare: new Float64Array(classCount),
      highestSquareAt: new Int32Array(classCount),
      needs,
    };
  }
}
