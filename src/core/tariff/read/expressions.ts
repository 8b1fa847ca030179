import { channels, isChannelName, type ChannelName } from '../channels';
import { compileFormula, place, type Evaluate } from '../formula/compile';
import { mapFormula, namesIn, numberFormula, walkFormula, type Formula } from '../formula/ast';
import { functionArity } from '../formula/functions';
import { parseFormula } from '../formula/parse';
import { FormulaMistake } from '../formula/tokens';
import type { Expression } from '../model';
import { nearestName } from '../nearest';
import { dimensionOfUnit, time, type Dimension, type Found } from './dimensions';
import type { Problems } from './problems';
import type { NameInfo, Scope } from './scope';
import type { ScalarTree, Tree } from './tree';
import { checkUnits } from './unit-check';
import { unitOf } from './unit-of';

/** A formula parsed and checked, families not yet bound to a window. */
export interface RawExpression {
  formula: Formula;
  tree: ScalarTree;
  /** Names of families it uses as such, `total(...)` left out. */
  families: string[];
  /** Of what kind its value is, as far as that can be told. */
  found: Found;
}

/** What the place of a formula allows. */
export interface ExpressionRules {
  /** Channels of the cell may be read. */
  channels?: boolean;
  /** Any quantity or line, also from below: looks back. */
  anyTime?: boolean;
  /** It makes an amount or a rate, where a bare name may stand for itself times 1: what clashes is noted, not refused. */
  makesMoney?: boolean;
}

const facts: ReadonlySet<string> = new Set(['days', 'hours']);

/** Reads formulas of one text: parses, checks names, binds families, compiles. */
export class ExpressionReader {
  /** Names looked back at before they were made, to be checked once everything is read. */
  readonly lookedBack: { name: string; tree: ScalarTree; offset: number }[] = [];

  constructor(
    readonly scope: Scope,
    readonly problems: Problems,
    private readonly zeroKwh: { pf?: number; ratio?: number },
    private readonly dates: ReadonlySet<string>,
    private readonly currency: string,
    private readonly notes: { path: string; message: string }[],
  ) {}

  /** Parses and checks a formula; a problem gives nothing. */
  parse(tree: Tree, rules: ExpressionRules = {}): RawExpression | undefined {
    if (tree.kind !== 'scalar' || tree.text === '') {
      const message = tree.kind === 'scalar' ? 'is empty.' : 'is not a single formula.';
      this.problems.add(tree, message, 'Write a number or a formula.');
      return undefined;
    }
    try {
      const formula = parseFormula(tree.text);
      if (!this.checkCalls(formula, tree) || !this.checkNames(formula, tree, rules)) return undefined;
      const found = this.checkUnits(formula, tree, rules);
      return found === 'problem' ? undefined : { formula, tree, families: this.familiesIn(formula, rules), found };
    } catch (error) {
      if (!(error instanceof FormulaMistake)) throw error;
      this.problems.addMistake(tree, tree.textOffset, error);
      return undefined;
    }
  }

  private complain(tree: ScalarTree, node: Formula, message: string, remedy: string): false {
    this.problems.addMistake(tree, tree.textOffset, new FormulaMistake(node.start, message, remedy));
    return false;
  }

  private checkCalls(formula: Formula, tree: ScalarTree): boolean {
    let isFine = true;
    walkFormula(formula, (node) => {
      if (node.kind !== 'call' || !isFine) return;
      const [first] = node.args;
      if ((node.fn === 'pf' || node.fn === 'ratio') && this.zeroKwh[node.fn] === undefined) {
        const rule = node.fn === 'pf' ? '{ pf: 1 }' : '{ ratio: 0 }';
        const message = `${node.fn}(...) is used, but the schedule doesn't say what it is in a period without kWh.`;
        isFine = this.complain(tree, node, message, `Add zeroKwh: ${rule}.`);
      } else if (node.fn === 'total' && !(first?.kind === 'name' && this.scope.families.has(first.name))) {
        isFine = this.complain(
          tree,
          node,
          'total( ) takes the name of a quantity that has one value per window.',
          'Make it with inEach; of lines, name the members: energyPeak + energyOffPeak.',
        );
      } else if (node.fn === 'daysSince' && !(first?.kind === 'name' && this.dates.has(first.name))) {
        isFine = this.complain(
          tree,
          node,
          'daysSince( ) takes a contract input with unit: date.',
          'Declare it under contract.',
        );
      }
    });
    return isFine;
  }

  private checkNames(formula: Formula, tree: ScalarTree, rules: ExpressionRules): boolean {
    let isFine = true;
    walkFormula(formula, (node) => {
      if (node.kind !== 'name' || !isFine) return;
      const { name } = node;
      const isMade = this.scope.made.has(name) || this.scope.families.has(name);
      if (facts.has(name) || (rules.channels && isChannelName(name))) return;
      // A look back may name what is made below, a member of a family too: checked once everything is read.
      if (isMade || rules.anyTime) {
        this.scope.used.add(name);
        if (!isMade) this.lookedBack.push({ name, tree, offset: tree.textOffset + node.start });
        return;
      }
      isFine = this.complain(tree, node, ...this.unknownName(name));
    });
    return isFine;
  }

  private checkUnits(formula: Formula, tree: ScalarTree, rules: ExpressionRules): Found | 'problem' {
    let isFine = true;
    const doubt = (message: string): void => this.note(tree.path, message);
    const isChannel = (name: string): boolean => rules.channels === true && isChannelName(name);
    const info = (name: string): NameInfo | undefined =>
      this.scope.made.get(this.scope.families.get(name)?.members[0] ?? name);
    const found = checkUnits(formula, {
      look: (name) => {
        if (name === 'hours') return time;
        return isChannel(name) ? this.dimensionOf(channels.get(name)?.unit ?? '') : info(name)?.found;
      },
      unitOf: (node) => unitOf(node, (name) => (isChannel(name) ? channels.get(name)?.unit : info(name)?.unit) ?? ''),
      refuse: (node, message, remedy) => {
        if (rules.makesMoney) doubt(`${message} ${remedy}`);
        else isFine = this.complain(tree, node, message, remedy);
      },
      doubt,
    });
    return isFine ? found : 'problem';
  }

  /** Notes what is allowed but odd, once for all texts. */
  note(path: string, message: string): void {
    if (!this.notes.some((note) => note.path === path && note.message === message)) this.notes.push({ path, message });
  }

  /** Kind of a unit as written, if it says one. */
  dimensionOf(unit: string): Dimension | undefined {
    return dimensionOfUnit(unit, this.currency);
  }

  private unknownName(name: string): [string, string] {
    if (this.scope.later.has(name)) return [`"${name}" comes later in the file;`, 'move it above.'];
    if (functionArity.has(name)) return [`"${name}" is a function.`, `Write ${name}( ) with its values.`];
    if (isChannelName(name))
      return [
        `"${name}" is a channel of the meter, not a quantity.`,
        `Measure it above, for instance total: { ${name.startsWith('kwh') || name.endsWith('h') || name.startsWith('kvarh') ? 'sum' : 'highest'}: ${name} }.`,
      ];
    const near = nearestName(name, [...this.scope.knownNames(), 'days', 'hours']);
    const remedy = near ?? nearestName(name, this.scope.later.keys());
    return [
      `nothing is called "${name}".`,
      remedy ? `Did you mean "${remedy}"?` : 'Names used here are made above: contract inputs, rates, quantities.',
    ];
  }

  private familiesIn(formula: Formula, rules: ExpressionRules): string[] {
    const found = new Set<string>();
    const collect = (node: Formula): void => {
      if (node.kind === 'call' && node.fn === 'total') return;
      if (node.kind === 'name' && this.scope.families.has(node.name) && !(rules.channels && isChannelName(node.name)))
        found.add(node.name);
      if (node.kind === 'call') node.args.forEach(collect);
      else if (node.kind === 'sign') collect(node.operand);
      else if (node.kind === 'binary') [node.left, node.right].forEach(collect);
    };
    collect(formula);
    return [...found];
  }

  /** Windows over which the families of some formulas run; none if no family is used. Different ones are a problem. */
  windowsOf(
    expressions: (RawExpression | undefined)[],
    at: { offset: number; path: string },
  ): string[] | undefined | 'problem' {
    let first: { name: string; windows: string[] } | undefined;
    for (const name of expressions.flatMap((expression) => expression?.families ?? [])) {
      const { windows } = this.scope.families.get(name)!;
      first ??= { name, windows };
      if ([...windows].sort().join() !== [...first.windows].sort().join()) {
        this.problems.add(
          at,
          `"${first.name}" and "${name}" stand for different windows.`,
          'Use total( ), or the member you mean, such as kwhPeak.',
        );
        return 'problem';
      }
    }
    return first?.windows;
  }

  /** Binds families to their member of a window and compiles. */
  bind(raw: RawExpression, window: string | undefined, rules: ExpressionRules = {}): Expression {
    const { families } = this.scope;
    const memberOf = (name: string): string => {
      const family = families.get(name);
      return family && window !== undefined ? (family.members[family.windows.indexOf(window)] ?? name) : name;
    };
    const formula = mapFormula(raw.formula, (node) => {
      if (node.kind === 'call' && node.fn === 'total' && node.args[0]?.kind === 'name') {
        const argument = node.args[0];
        const members = families.get(argument.name)?.members ?? [];
        for (const member of members) this.scope.used.add(member);
        return { ...node, args: members.map((name) => ({ ...argument, name })) };
      }
      if (node.kind !== 'name' || (rules.channels && isChannelName(node.name))) return undefined;
      const name = memberOf(node.name);
      this.scope.used.add(name);
      return { ...node, name };
    });
    return this.compile(formula, raw.tree.path, rules);
  }

  private compile(formula: Formula, path: string, rules: ExpressionRules): Expression {
    const all = namesIn(formula);
    const isChannel = (name: string): name is ChannelName => rules.channels === true && isChannelName(name);
    const names = all.filter((name) => !isChannel(name) && !facts.has(name));
    return {
      formula,
      path,
      names,
      slots: names.map((name) => this.scope.slots.of(name)),
      channels: all.filter(isChannel),
      evaluate: compileFormula(formula, (name) => this.evaluateName(name, isChannel(name))),
    };
  }

  private evaluateName(name: string, isChannel: boolean): Evaluate {
    const channel = isChannel ? channels.get(name) : undefined;
    if (channel) return channel.evaluate;
    if (name === 'days') return (v) => v[place.days]!;
    if (name === 'hours') return (v) => v[place.hours]!;
    const slot = this.scope.slots.of(name);
    return (v) => v[slot]!;
  }

  /** An expression that is one number of the language itself. */
  constant(value: number, path: string): Expression {
    return this.compile(numberFormula(value), path, {});
  }

  /** Unit of a formula as far as it can be told: a ratio, a count and whatever is unclear are bare numbers. */
  unitOf(expression: Expression): string {
    return unitOf(expression.formula, (name) => {
      if (expression.channels.some((used) => used === name)) return channels.get(name)?.unit ?? '';
      return this.scope.made.get(name)?.unit ?? '';
    });
  }

  /** Notes names a look back uses that nothing in the text bears, or that stand for several values. */
  checkLookedBack(): void {
    for (const { name, tree, offset } of this.lookedBack) {
      const family = this.scope.families.get(name);
      if (this.scope.made.has(name)) continue;
      const [message, remedy] = family
        ? [`"${name}" is made below, one value per window.`, `Name the members: ${family.members.join(' + ')}.`]
        : this.unknownName(name);
      this.problems.add({ offset, path: tree.path }, message, remedy);
    }
  }
}
