/** What a syntax error of the YAML parser means to the person who wrote the line, and what to do. */
export function wordYamlError(
  error: { code: string; message: string; pos: readonly [number, number] },
  text: string,
): { message: string; remedy: string } {
  const line = lineAt(text, error.pos[0]);
  const known = knownErrors[error.code]?.(line, text.slice(error.pos[0]), error.message);
  if (known) return { message: known[0], remedy: known[1] };
  return {
    message: `is not YAML: ${error.message.replace(/\.$/, '')}.`,
    remedy: 'Check colons, indents and brackets here.',
  };
}

type Words = readonly [message: string, remedy: string];

const knownErrors: Record<string, ((line: string, rest: string, message: string) => Words | undefined) | undefined> = {
  MULTIPLE_DOCS: () => ['holds more than one document.', 'Keep one schedule in a file.'],
  TAB_AS_INDENT: () => ['a tab indents this line.', 'Indent with blanks.'],
  BAD_INDENT: (_, __, message) =>
    message.startsWith('Flow')
      ? ['a { or [ above is not closed.', 'Close it with } or ], on its own line or further in than its name.']
      : ['this line is indented like none above it.', 'Indent it like its neighbours.'],
  BLOCK_AS_IMPLICIT_KEY: colonInside,
  BLOCK_IN_FLOW: colonInside,
  MULTILINE_IMPLICIT_KEY: (line) => {
    const [, key, value] = /^\s*(?:- )?([A-Za-z][A-Za-z0-9]*):(\S.*)$/.exec(line) ?? [];
    return key === undefined
      ? ['this line has no colon.', 'Write a name, a colon, a blank and a value: rate: 0.10.']
      : ['no blank stands behind the colon.', `Write ${key}: ${value}.`];
  },
  MISSING_CHAR: (line, rest) =>
    /quote/.test(rest) || /["']/.test(line)
      ? ['a quotation mark is not closed.', 'Close it on the same line.']
      : ['a bracket or a quotation mark is not closed.', 'Close every { [ " with its } ] ".'],
  UNEXPECTED_TOKEN: (_, rest) =>
    /^[}\]]/.test(rest) ? [`a ${rest.charAt(0)} closes nothing.`, 'Take it away, or open it before.'] : undefined,
  BAD_SCALAR_START: (_, rest) => [
    `a value cannot begin with ${rest.charAt(0)}.`,
    `Put it in quotes: "${rest.split(/[\n,}]/, 1)[0]!.trim()}".`,
  ],
};

function colonInside(): Words {
  return [
    'a second colon stands in this value.',
    'Put texts with a colon in quotes, entries in braces: { to: 5, rate: 1 }.',
  ];
}

function lineAt(text: string, offset: number): string {
  const start = text.lastIndexOf('\n', offset - 1) + 1;
  const end = text.indexOf('\n', offset);
  return text.slice(start, end < 0 ? undefined : end);
}
