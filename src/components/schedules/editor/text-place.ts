/** Where in a schedule's text the cursor stands. */
export interface TextPlace {
  /** Keys from the top; items of a list by number. At a key: of the set it belongs to. At a value: with its own key. */
  path: string[];
  kind: 'key' | 'value';
  /** Keys the set has already, above the cursor. */
  keys: string[];
}

/** Names an author has made, by section: `names.get('windows')`. */
export type TextNames = Map<string, string[]>;

interface Block {
  indent: number;
  key: string;
  keys: string[];
}

interface Flow {
  opened: '{' | '[';
  key: string | null;
  index: number;
  keys: string[];
}

const lineShape = /^( *)((?:- +)*)(?:([A-Za-z0-9_.-]+)[ \t]*:(?=\s|$))?/;

/** Follows a text from its top: sets by indentation and by brackets. It takes broken text as it comes. */
class Scanner {
  readonly names: TextNames = new Map();
  private readonly blocks: Block[] = [];
  private top: string[] = [];
  private readonly flows: Flow[] = [];
  private hasKey = false;
  private word = '';

  scan(text: string): void {
    for (const [index, line] of text.split('\n').entries()) {
      if (index > 0) this.endWord();
      if (this.flows.length > 0) this.follow(line);
      else this.begin(line);
    }
  }

  /** The place at the end of what was scanned. */
  place(): TextPlace {
    const path = this.blocks.map(({ key }) => key);
    const flow = this.flows.at(-1);
    if (!flow) {
      const keys = this.hasKey ? [] : (this.blocks.at(-1)?.keys ?? this.top);
      return { path, kind: this.hasKey ? 'value' : 'key', keys };
    }
    const outer = this.flows.slice(0, -1).map(({ key, index }) => key ?? String(index));
    if (flow.opened === '[') return { path: [...path, ...outer, String(flow.index)], kind: 'value', keys: [] };
    if (flow.key === null) return { path: [...path, ...outer], kind: 'key', keys: flow.keys };
    return { path: [...path, ...outer, flow.key], kind: 'value', keys: [] };
  }

  private begin(line: string): void {
    const [whole, blanks = '', dashes = '', key] = lineShape.exec(line) ?? [''];
    const isBlank = /^\s*(#|$)/.test(line);
    const indent = blanks.length;
    // An empty line belongs to the set its blanks reach into.
    while ((this.blocks.at(-1)?.indent ?? -1) >= indent) this.blocks.pop();
    this.hasKey = false;
    if (isBlank) return;
    for (let at = 0; at < dashes.trim().split(/\s+/).filter(Boolean).length; at++) {
      this.blocks.push({ indent: indent + at, key: '1', keys: [] });
    }
    if (key === undefined) {
      this.word = '';
      if (dashes !== '') this.hasKey = true;
      this.follow(line.slice(whole.length));
      return;
    }
    (this.blocks.at(-1)?.keys ?? this.top).push(key);
    this.blocks.push({ indent: indent + dashes.length, key, keys: [] });
    this.hasKey = true;
    this.note();
    this.follow(line.slice(whole.length));
  }

  private follow(part: string): void {
    let quote = '';
    for (let at = 0; at < part.length; at++) {
      const sign = part[at]!;
      if (quote !== '') {
        if (sign === quote) quote = '';
      } else if (sign === '"' || sign === "'") quote = sign;
      else if (sign === '#' && (at === 0 || part[at - 1] === ' ')) return;
      else this.take(sign);
    }
  }

  private take(sign: string): void {
    const flow = this.flows.at(-1);
    if (sign === '{' || sign === '[') {
      this.flows.push({ opened: sign, key: null, index: 1, keys: [] });
      this.word = '';
    } else if (!flow) return;
    else if (sign === '}' || sign === ']') {
      this.flows.pop();
      this.word = '';
    } else if (sign === ',') {
      flow.key = null;
      flow.index += 1;
      this.word = '';
    } else if (sign === ':' && flow.opened === '{' && flow.key === null) {
      flow.key = this.word.trim();
      flow.keys.push(flow.key);
      this.word = '';
      this.note();
    } else this.word += sign;
  }

  private endWord(): void {
    this.word += ' ';
  }

  /** Remembers a name the author has made: the second key of a path, or the fourth inside versions. */
  private note(): void {
    const path = [...this.blocks.map(({ key }) => key), ...this.flows.flatMap(({ key }) => key ?? [])];
    const own = path[0] === 'versions' ? path.slice(2) : path;
    const [section, name] = own;
    if (own.length !== 2 || section === undefined || name === undefined) return;
    const known = this.names.get(section) ?? [];
    if (!known.includes(name)) this.names.set(section, [...known, name]);
  }
}

/** Where the cursor stands at an offset of a text. */
export function placeAt(text: string, offset: number): TextPlace {
  const scanner = new Scanner();
  scanner.scan(text.slice(0, offset));
  return scanner.place();
}

/** Names an author has made anywhere in a text. */
export function namesIn(text: string): TextNames {
  const scanner = new Scanner();
  scanner.scan(text);
  return scanner.names;
}
