import { layCells, type CellGround, type CellPlan } from '../calendar/cells';
import { PeriodWindows } from '../calendar/period-calendar';
import { channelOf } from '../channels';
import type { Expression, MeasureDefinition, QuantityEntry } from '../model';
import type { PricingGrid } from '../types';
import { CellBlock } from './cell-block';
import type { CellFormula } from './cell-loops';
import type { ClassPlan } from './class-loops';
import { ColumnCompiler } from './columns';
import type { PeriodPlan } from './period-plan';
import type { TextPlan } from './text-plan';

/** How a measure is gathered from intervals. */
export type MeasurePlan =
  | { kind: 'sum'; channel: 'kwh' | 'kvarhLagging' | 'kvarhLeading' | 'kvarhNet'; classes: Uint8Array }
  | { kind: 'peak'; channel: 'kw' | 'kva'; classes: Uint8Array }
  | { kind: 'cells'; cells: CellPlan; formula: CellFormula };

/** Everything of one text in one period that does not depend on the load: classes, cells and how each measure uses them. */
export interface Reduction {
  classes: ClassPlan;
  cells: CellPlan[];
  /** By place of the quantity. */
  measures: ReadonlyMap<number, MeasurePlan>;
}

/** Formulas of measures compiled for cells, each once for all periods. */
export class CellFormulas {
  private readonly block = new CellBlock();
  private readonly compiler = new ColumnCompiler(this.block);
  private readonly room = this.block.addRoom();
  private readonly byMeasure = new Map<MeasureDefinition, CellFormula>();

  /** The formula of a measure over some cells. */
  of(definition: MeasureDefinition, cells: CellPlan): CellFormula {
    const { block, compiler, room } = this;
    block.reserve(cells);
    let formula = this.byMeasure.get(definition);
    if (!formula) {
      const { expression, where } = definition;
      formula = {
        definition,
        block,
        room,
        column: compiler.compile(expression),
        where: where && compiler.compile(where),
      };
      this.byMeasure.set(definition, formula);
    }
    return formula;
  }
}

/** What a period's measures are laid over. */
export interface PeriodLayout {
  text: TextPlan;
  plan: PeriodPlan;
  ground: CellGround;
  grid: PricingGrid;
  formulas: CellFormulas;
}

/** Lays out the gathering of one text's measures in one period. */
export function planReduction(over: PeriodLayout): Reduction {
  const { text } = over;
  const layout = new Layout(over);
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
    if (measure.kind === 'cells') needRegisters(measure.cells, expressionsAt(text, quantity, definition));
  }
  const needs = needsOf(measures, measured);
  return { classes: layout.layRuns(classOf, masks.length, needs), cells: layout.cells, measures };
}

/** Formulas of a measure and of the values taken at its instant. */
function expressionsAt({ text }: TextPlan, { name }: QuantityEntry, definition: MeasureDefinition): Expression[] {
  const atIt = text.quantities.flatMap((other) =>
    other.definition.kind === 'value' && other.definition.at === name ? [other.definition.expression] : [],
  );
  return [definition.expression, ...(definition.where ? [definition.where] : []), ...atIt];
}

function needRegisters(cells: CellPlan, expressions: Expression[]): void {
  for (const channel of expressions.flatMap(({ channels }) => channels)) {
    cells.needsLagging ||= channelOf(channel).usesLagging;
    cells.needsLeading ||= channelOf(channel).usesLeading;
  }
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

  private readonly windows: PeriodWindows;

  constructor(private readonly over: PeriodLayout) {
    const { text, plan, ground, grid } = over;
    this.windows = new PeriodWindows(text.text, plan, ground.calendar, grid.stepMinutes);
  }

  /** Whether a highest kw or kva can be read off single intervals. */
  isPeak({ operation, channel, each, where, count }: MeasureDefinition): boolean {
    const isChannel = channel === 'kw' || channel === 'kva';
    const window = this.over.text.text.demandWindow;
    const { stepMinutes } = this.over.grid;
    const isShort = !window || window.minutes < stepMinutes || (window.minutes === stepMinutes && !window.everyMinutes);
    const isInterval = each === 'interval' || (each === 'demand window' && isShort);
    return operation === 'highest' && isChannel && isInterval && where === undefined && count === 1;
  }

  private inside(window: string): Uint8Array {
    let inside = this.insideByWindow.get(window);
    if (!inside) {
      inside = this.windows.positionsInside(window);
      this.insideByWindow.set(window, inside);
    }
    return inside;
  }

  /** Class of every position: the combination of windows it lies in. */
  classify(windows: string[]): { classOf: Uint16Array; masks: number[] } {
    const { count } = this.over.ground.calendar;
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
    const cells = this.cellsOf(definition);
    return { kind: 'cells', cells, formula: this.over.formulas.of(definition, cells) };
  }

  private cellsOf({ each, window }: MeasureDefinition): CellPlan {
    const kind = each ?? 'interval';
    const key = `${kind}|${window ?? ''}`;
    let cells = this.cellsByKey.get(key);
    if (!cells) {
      cells = layCells(
        kind,
        this.over.ground,
        window === undefined ? null : this.inside(window),
        this.over.text.text.demandWindow,
      );
      this.cellsByKey.set(key, cells);
      this.cells.push(cells);
    }
    return cells;
  }

  layRuns(classOf: Uint16Array, classCount: number, needs: ClassPlan['needs']): ClassPlan {
    const { calendar, seriesCount, pieceEnds } = this.over.ground;
    const firsts: number[] = [];
    const ends: number[] = [];
    const groups: number[] = [];
    const pieces: number[] = [];
    let piece = 0;
    const from = Math.max(0, -calendar.first);
    const to = Math.min(calendar.count, seriesCount - calendar.first);
    for (let position = from; position < to; position++) {
      while (position >= pieceEnds[piece]!) piece++;
      const last = firsts.length - 1;
      const interval = calendar.first + position;
      if (last >= 0 && groups[last] === classOf[position] && pieces[last] === piece) ends[last] = interval + 1;
      else {
        firsts.push(interval);
        ends.push(interval + 1);
        groups.push(classOf[position]!);
        pieces.push(piece);
      }
    }
    const room = pieceEnds.length * classCount;
    return {
      classCount,
      pieceCount: pieceEnds.length,
      runFirst: Int32Array.from(firsts),
      runEnd: Int32Array.from(ends),
      runClass: Int32Array.from(groups),
      runPiece: Int32Array.from(pieces),
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
