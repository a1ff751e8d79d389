import type { Extension } from '@codemirror/state';
import { EditorView } from '@codemirror/view';

/** The look that both editors share, in our tokens. */
export function editorLook(nonce: string | null): Extension {
  return [
    nonce ? EditorView.cspNonce.of(nonce) : [],
    EditorView.theme({
      '&': { color: 'var(--ink)', backgroundColor: 'transparent', fontSize: '14px' },
      '&.cm-focused': { outline: 'none' },
      '.cm-scroller': { fontFamily: 'var(--mono)', lineHeight: '20px' },
      '.cm-content': { caretColor: 'var(--line)', padding: '0' },
      '.cm-cursor, .cm-dropCursor': { borderLeftColor: 'var(--line)', borderLeftWidth: '2px' },
      '&.cm-focused > .cm-scroller > .cm-selectionLayer .cm-selectionBackground, .cm-selectionBackground': {
        backgroundColor: 'var(--line-wash)',
      },
      // The box around an editor shows that it has the focus.
      '.cm-content:focus-visible': { outline: 'none' },
      '.cm-line': { padding: '0' },
      '.cm-gutters': { backgroundColor: 'transparent', border: '0', color: 'var(--silver-4)', fontSize: '12px' },
      '.cm-activeLineGutter': { backgroundColor: 'transparent', color: 'var(--ink)' },
      '.cm-lineNumbers .cm-gutterElement': { padding: '0 12px 0 0', minWidth: '20px', textAlign: 'left' },
      '.cm-given': { color: 'var(--line)', fontWeight: '600' },
      '.cm-unknown': { color: 'var(--wrong)' },
      '.cm-number': { color: 'var(--silver-4)' },
      '.cm-formula': { color: 'var(--ft)' },
      '.cm-opening': { fontWeight: '600' },
      '.cm-noted': { position: 'relative', paddingRight: '64px', backgroundColor: 'var(--silver-1)' },
      '.cm-noted-shown': { backgroundColor: 'var(--line-wash)' },
      '.cm-noted::after': {
        content: 'attr(data-by)',
        position: 'absolute',
        top: '0',
        right: '8px',
        font: '600 12px/20px var(--ui)',
      },
      '.cm-noted-shown::after': { color: 'var(--line)' },
      '.cm-matchingBracket, &.cm-focused .cm-matchingBracket': {
        backgroundColor: 'var(--silver-1)',
        outline: '1px solid var(--silver-2)',
      },
      '.cm-lintRange-error': {
        backgroundImage: 'none',
        textDecoration: 'underline wavy var(--wrong) 1px',
        textUnderlineOffset: '3px',
      },
      '.cm-lintPoint-error::after': { borderBottomColor: 'var(--wrong)' },
      '.cm-tooltip': {
        color: 'var(--ink)',
        backgroundColor: 'var(--paper)',
        border: '1px solid var(--edge)',
        borderRadius: 'var(--radius)',
        font: 'var(--t-14)',
      },
      '.cm-tooltip.cm-tooltip-autocomplete > ul': { fontFamily: 'var(--mono)', maxHeight: '240px' },
      '.cm-tooltip.cm-tooltip-autocomplete > ul > li': { padding: '4px 12px', lineHeight: '20px' },
      '.cm-tooltip-autocomplete ul li[aria-selected]': { color: 'var(--ink)', backgroundColor: 'var(--line-wash)' },
      '.cm-completionDetail': { color: 'var(--silver-4)', fontStyle: 'normal', fontFamily: 'var(--ui)' },
      '.cm-completionInfo': { padding: '8px 12px', maxWidth: '320px' },
      '.cm-completionMatchedText': { textDecoration: 'none', fontWeight: '600' },
      '.cm-signature': { padding: '4px 12px', fontFamily: 'var(--mono)', fontSize: '12px', lineHeight: '20px' },
      '.cm-signature b': { color: 'var(--line)' },
      '.cm-signature p': { fontFamily: 'var(--ui)', color: 'var(--silver-4)', maxWidth: '420px' },
      '.cm-signature .cm-described p, .cm-completionInfo p': { margin: '0 0 4px' },
      '.cm-described .formula': { fontSize: '16px', color: 'var(--ink)' },
      '.cm-diagnostic': { padding: '4px 12px', border: '0' },
      '.cm-placeholder': { color: 'var(--silver-4)' },
    }),
  ];
}
