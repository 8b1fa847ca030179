import { HighlightStyle, syntaxHighlighting } from '@codemirror/language';
import { EditorView } from '@codemirror/view';
import { tags } from '@lezer/highlight';

const wash = 'var(--color-madder-wash)';
const edge = 'inset 4px 0 var(--color-madder)';

/** The look of the schedule's text: the one place for a monospaced face. Colours come from the page's tokens. */
const look = EditorView.theme({
  '&': {
    border: '1px solid var(--color-rule-2)',
    backgroundColor: 'var(--color-sheet)',
    color: 'var(--color-ink)',
    fontSize: '12.5px',
  },
  '&.cm-focused': { outline: '2px solid var(--color-focus)', outlineOffset: '2px' },
  '.cm-scroller': { fontFamily: 'var(--font-mono)', lineHeight: '20px', maxHeight: 'var(--editor-height, none)' },
  // What does not fit a line goes on a little to the right of where it began.
  '.cm-line': { paddingLeft: 'calc(6px + 4ch)', textIndent: '-4ch' },
  '.cm-content': { padding: '6px 0', caretColor: 'var(--color-ink)' },
  '.cm-cursor, .cm-dropCursor': { borderLeftColor: 'var(--color-ink)' },
  '.cm-gutters': { border: 'none', backgroundColor: 'var(--color-sheet)', color: 'var(--color-ink-2)' },
  '.cm-lineNumbers .cm-gutterElement': { minWidth: '36px', padding: '0 10px 0 4px', fontSize: '12px' },
  '.cm-activeLine, .cm-activeLineGutter': { backgroundColor: 'var(--color-well)' },
  '.cm-line.cm-sought': { backgroundColor: 'var(--color-copper-wash)' },
  '&.cm-focused > .cm-scroller > .cm-selectionLayer .cm-selectionBackground, .cm-selectionBackground': {
    backgroundColor: 'var(--color-copper-wash)',
  },
  '.cm-matchingBracket, &.cm-focused .cm-matchingBracket': {
    backgroundColor: 'transparent',
    outline: '1px solid var(--color-rule-2)',
  },
  '.cm-line.cm-faulty': { backgroundColor: wash, boxShadow: edge },
  '.cm-slip': { textDecoration: 'underline wavy var(--color-madder) 1.5px', textUnderlineOffset: '4px' },
  '.cm-note': { textDecoration: 'underline dotted var(--color-ochre) 1.5px', textUnderlineOffset: '4px' },
  '.cm-message': {
    padding: '2px 12px 8px 44px',
    boxShadow: edge,
    backgroundColor: wash,
    font: '400 var(--text-sm) / 18px var(--font-sans)',
    whiteSpace: 'normal',
  },
  '.cm-message b': { color: 'var(--color-madder)' },
  '.cm-message button': {
    minHeight: '24px',
    marginLeft: '8px',
    padding: '0 8px',
    border: '1px solid var(--color-rule-2)',
    borderRadius: '2px',
    background: 'var(--color-sheet)',
    color: 'var(--color-ink)',
    font: '400 var(--text-sm) / 20px var(--font-sans)',
    cursor: 'pointer',
  },
  '.cm-tooltip': {
    border: '1px solid var(--color-ink)',
    borderRadius: '2px',
    backgroundColor: 'var(--color-sheet)',
    color: 'var(--color-ink)',
  },
  '.cm-tooltip.cm-tooltip-autocomplete > ul': { fontFamily: 'var(--font-mono)', maxHeight: '240px' },
  '.cm-tooltip.cm-tooltip-autocomplete > ul > li': { padding: '3px 8px', lineHeight: '20px' },
  '.cm-tooltip-autocomplete ul li[aria-selected]': {
    backgroundColor: 'var(--color-copper-wash)',
    color: 'var(--color-ink)',
  },
  '.cm-completionDetail': { color: 'var(--color-ink-2)', fontStyle: 'normal' },
  '.cm-tooltip.cm-completionInfo': {
    maxWidth: '320px',
    padding: '8px 10px',
    font: '400 var(--text-sm) / 18px var(--font-sans)',
  },
  '.cm-panels': { backgroundColor: 'var(--color-well)', color: 'var(--color-ink)' },
  '.cm-panel input, .cm-panel button': { font: '400 var(--text-sm) / 20px var(--font-sans)' },
  '.cm-searchMatch': { backgroundColor: 'var(--color-ochre-wash)' },
});

const words = HighlightStyle.define([
  { tag: [tags.propertyName, tags.definition(tags.propertyName)], fontWeight: '700' },
  { tag: tags.comment, color: 'var(--color-ink-2)' },
]);

/** Look and highlighting of the schedule's text. */
export const textTheme = [look, syntaxHighlighting(words)];
