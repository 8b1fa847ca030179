import { namesIn, type BinaryOperator, type Formula } from '../formula/ast';
import { compileFormula, place, type Evaluate } from '../formula/compile';
import { between, comparisons, hypot2, tangentOf } from '../formula/functions';
import type { Expression } from '../model';
import type { CellBlock } from './cell-block';
import * as steps from './column-steps';
import type { Column, StepRoom } from './column-steps';

/**
 * Compiles formulas of channels, quantities and rates into columns: worked out for a block of cells at once, step after step.
 *
 * In each cell a column gives what the formula's closure gives there, some times as fast. Where a step has no value in some cell, `fill`
 * answers false: only the closure, cell by cell, can tell whether that cell and that step count.
 */
export class ColumnCompiler {
  private readonly channels = new Map<string, Column>();
  /** Rooms of steps by their depth; all formulas share them. */
  private readonly roomAtDepth: number[] = [];

  constructor(private readonly block: CellBlock) {}

  /** Compiles a formula. */
  readonly compile = ({ formula, names, slots, channels }: Expression): Column => {
    const nameOf = (name: string): Evaluate => {
      const slot = name === 'days' ? place.days : name === 'hours' ? place.hours : slots[names.indexOf(name)]!;
      return (v) => v[slot]!;
    };
    const isChannel = (name: string): boolean => channels.some((channel) => channel === name);
    const compile = (node: Formula, depth: number): Column => {
      const room = this.room(depth);
      if (!namesIn(node).some(isChannel)) return steps.constantColumn(room, compileFormula(node, nameOf));
      switch (node.kind) {
        case 'name':
          return this.channel(node.name);
        case 'sign': {
          const operand = compile(node.operand, depth);
          return steps.mapped(room, operand, node.operator === '-' ? (a) => -a : (a) => (a === 0 ? 1 : 0));
        }
        case 'binary':
          return binaryColumn(room, node.operator, compile(node.left, depth), compile(node.right, depth + 1));
        case 'call': {
          const args = node.args.map((argument, i) => compile(argument, depth + i));
          return callColumn(room, node.fn, args);
        }
        case 'number':
          throw new RangeError('kind must be one that can read a channel, got number');
      }
    };
    return compile(formula, 0);
  };

  private room(depth: number): StepRoom {
    const room = (this.roomAtDepth[depth] ??= this.block.addRoom());
    return { block: this.block, room };
  }

  /** A channel of the cells; one that must be worked out is so once in each block. */
  private channel(name: string): Column {
    let column = this.channels.get(name);
    if (!column) this.channels.set(name, (column = this.makeChannel(name)));
    return column;
  }

  private makeChannel(name: string): Column {
    const { block } = this;
    const shared = (make: (room: StepRoom) => Column): Column =>
      steps.sharedColumn(block, make({ block, room: block.addRoom() }));
    switch (name) {
      case 'kwh':
      case 'kvarhLagging':
      case 'kvarhLeading':
        return steps.registerColumn(block, name);
      case 'kvarhNet':
        return shared((room) => steps.minus(room, this.channel('kvarhLagging'), this.channel('kvarhLeading')));
      case 'kvah':
        return shared((room) => steps.lengths(room, this.channel('kwh'), this.channel('kvarhNet')));
      case 'kw':
        return shared((room) => steps.overHours(room, this.channel('kwh')));
      case 'kva':
        return shared((room) => steps.overHours(room, this.channel('kvah')));
      case 'kvarLagging':
      case 'kvarLeading':
      case 'kvarNet':
        return shared((room) => steps.overHours(room, this.channel(name.replace('kvar', 'kvarh'))));
      default:
        throw new RangeError(`name must be a channel, got ${name}`);
    }
  }
}

function binaryColumn(room: StepRoom, operator: BinaryOperator, left: Column, right: Column): Column {
  switch (operator) {
    case '+':
      return steps.plus(room, left, right);
    case '-':
      return steps.minus(room, left, right);
    case '*':
      return steps.times(room, left, right);
    case '/':
      return steps.divided(room, left, right);
    case '^': {
      const powers = steps.zipped(room, left, right, (a, b) => a ** b);
      return steps.tested(room, powers, Number.isFinite);
    }
    case 'and':
      return steps.zipped(room, left, right, (a, b) => (a !== 0 && b !== 0 ? 1 : 0));
    case 'or':
      return steps.zipped(room, left, right, (a, b) => (a !== 0 || b !== 0 ? 1 : 0));
    default: {
      const compare = comparisons[operator];
      return steps.zipped(room, left, right, (a, b) => (compare(a, b) ? 1 : 0));
    }
  }
}

function callColumn(room: StepRoom, fn: string, args: Column[]): Column {
  const [a, b, c] = args as [Column, Column, Column];
  const folded = (fold: (x: number, y: number) => number): Column =>
    args.slice(1).reduce((result, argument) => steps.zipped(room, result, argument, fold), a);
  switch (fn) {
    case 'min':
      return folded(Math.min);
    case 'max':
      return folded(Math.max);
    case 'hypot':
      return args.length === 1 ? steps.mapped(room, a, Math.abs) : folded(hypot2);
    case 'abs':
      return steps.mapped(room, a, Math.abs);
    case 'sqrt': {
      const roots = steps.tested(room, a, (value) => !(value < 0));
      return steps.mapped(room, roots, Math.sqrt);
    }
    case 'tanOf': {
      const powerFactors = steps.tested(room, a, (value) => value > 0 && value <= 1);
      return steps.mapped(room, powerFactors, tangentOf);
    }
    case 'excess':
      return steps.exceeding(room, a, b);
    case 'between':
      return steps.chosen(room, [a, b, c], between);
    case 'if':
      return steps.chosen(room, [a, b, c], (condition, x, y) => (condition !== 0 ? x : y));
    case 'pf':
      return steps.powerFactors(room, a, b);
    case 'ratio':
      return steps.ratios(room, a, b);
    default:
      throw new RangeError(`fn must be a function that can read a channel, got ${fn}`);
  }
}
