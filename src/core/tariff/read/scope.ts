import { reservedWords } from '../formula/functions';
import type { Found } from './dimensions';
import type { Problems, Placed } from './problems';

/** What a name stands for. `broken` entries stay known, so that they cause no further problems. */
export interface NameInfo {
  kind: 'contract' | 'rate' | 'quantity' | 'line' | 'broken';
  unit: string;
  /** Whether a formula's unit was left out (a bare number). */
  hasUnit: boolean;
  /** Of what kind its value is, as far as that can be told. */
  found?: Found;
}

/** A name that stands for one value per window. */
export interface Family {
  kind: 'quantity' | 'line' | 'broken';
  windows: string[];
  members: string[];
}

/** Words of what a name is, for messages. */
export const kindWords: Record<NameInfo['kind'], string> = {
  contract: 'a contract input',
  rate: 'a rate',
  quantity: 'a quantity',
  line: 'a charge',
  broken: 'an entry',
};

/** The places of names in the array of values; shared by all texts of a schedule, so that history can be read across versions. */
export class Slots {
  readonly byName = new Map<string, number>();

  constructor(private readonly first: number) {}

  of(name: string): number {
    let slot = this.byName.get(name);
    if (slot === undefined) {
      slot = this.first + this.byName.size;
      this.byName.set(name, slot);
    }
    return slot;
  }
}

/** Names of one text: those made so far, those that come later in the file, and families. */
export class Scope {
  readonly made = new Map<string, NameInfo>();
  readonly families = new Map<string, Family>();
  readonly later = new Map<string, { words: string; line: number }>();
  readonly used = new Set<string>();
  private readonly taken = new Map<string, { words: string; line: number }>();

  constructor(
    private readonly problems: Problems,
    readonly slots: Slots,
  ) {}

  /** Announces a name of the file before it is read, and refuses a name that is no name or is taken. */
  announce(name: string, kind: NameInfo['kind'], at: Placed): boolean {
    const problem = this.problemWith(name);
    if (problem) this.problems.add(at, problem.message, problem.remedy);
    else {
      const entry = { words: kindWords[kind], line: this.problems.lineOf(at.offset) };
      this.later.set(name, entry);
      this.taken.set(name, entry);
    }
    return problem === undefined;
  }

  private problemWith(name: string): { message: string; remedy: string } | undefined {
    if (!/^[a-z][A-Za-z0-9]*$/.test(name)) {
      return {
        message: `"${name}" is not a name.`,
        remedy: 'A name is a small letter, then letters and digits: billedKva.',
      };
    }
    if (reservedWords.has(name)) {
      return { message: `"${name}" is a word of the language.`, remedy: 'Choose another name.' };
    }
    const taken = this.taken.get(name);
    if (!taken) return undefined;
    return {
      message: `"${name}" is already the name of ${taken.words} (line ${taken.line}).`,
      remedy: 'Every name is used once.',
    };
  }

  /** Makes a name usable below. */
  make(name: string, info: NameInfo): void {
    this.made.set(name, info);
    this.later.delete(name);
    this.slots.of(name);
  }

  /** Makes a family and its members usable below. */
  makeFamily(name: string, family: Family, info: NameInfo): void {
    this.families.set(name, family);
    this.later.delete(name);
    for (const member of family.members) this.make(member, info);
  }

  /** Keeps a broken entry's name known. */
  makeBroken(name: string): void {
    this.make(name, { kind: 'broken', unit: '', hasUnit: true });
  }

  /** Names a formula may use here. */
  knownNames(): string[] {
    return [...this.made.keys(), ...this.families.keys()];
  }
}

/** Name of a family's member: `kwh` in `peak` is `kwhPeak`. */
export function memberName(family: string, window: string): string {
  return family + window.charAt(0).toUpperCase() + window.slice(1);
}
