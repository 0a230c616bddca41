/** The text of a matrix, with what was found in it marked where it stands. */
import { defaultKeymap, history, historyKeymap, isolateHistory, redo, undo } from '@codemirror/commands';
import { lintGutter, setDiagnostics, type Diagnostic as Marked } from '@codemirror/lint';
import { EditorState } from '@codemirror/state';
import { drawSelection, EditorView, keymap, lineNumbers, placeholder } from '@codemirror/view';
import { effect, type ReadonlySignal } from '@preact/signals';
import { useEffect, useRef } from 'preact/hooks';

import type { Diagnostic, Repair } from '../../shared/generated/eigenledger';
import { expectedIn } from './findings';

/** One replacement of a stretch of the text, offsets in UTF-16 code units. */
export interface Replacement {
  readonly from: number;
  readonly to: number;
  readonly insert: string;
}

/** What other views of the same text may ask of the editor. */
export interface EditorHandle {
  /** Replaces a stretch in one step that one undo takes back. */
  readonly change: (replacement: Replacement) => void;
  readonly undo: () => void;
  readonly redo: () => void;
  /** Selects a stretch, scrolls to it and gives the editor the keyboard. */
  readonly show: (from: number, to: number) => void;
}

interface EditorProps {
  readonly label: string;
  /** The text as the document has it; the editor follows at once. */
  readonly text: ReadonlySignal<string>;
  readonly hint: string;
  /** Undefined while they are being made: the marks on show stay. */
  readonly diagnostics: readonly Diagnostic[] | undefined;
  readonly onText: (text: string) => void;
  readonly onRepair: (repair: Repair) => void;
  /** Takes a whole paste; returns whether it did. */
  readonly onPaste: (text: string) => boolean;
  readonly onReady: (handle: EditorHandle) => void;
}

const theme = EditorView.theme({
  '&': { backgroundColor: 'var(--well)', border: '1px solid var(--rule)', borderRadius: '0.3rem', fontSize: '0.95rem' },
  '&.cm-focused': { outline: '2px solid var(--accent)', outlineOffset: '1px' },
  '.cm-scroller': { fontFamily: 'var(--mono)', lineHeight: '1.55', maxHeight: '26rem', minHeight: '7rem' },
  '.cm-content': { caretColor: 'var(--ink)', minHeight: '7rem' },
  '.cm-cursor': { borderLeftColor: 'var(--ink)' },
  '.cm-gutters': { backgroundColor: 'transparent', color: 'var(--ink-faint)', border: 'none' },
  '.cm-lineNumbers .cm-gutterElement': { minWidth: '2.2em' },
  '&.cm-focused > .cm-scroller > .cm-selectionLayer .cm-selectionBackground, .cm-selectionBackground': {
    backgroundColor: 'var(--accent-soft)',
  },
  '.cm-lintRange-error, .cm-lintRange-warning': {
    backgroundImage: 'none',
    textDecoration: 'underline wavy var(--shade-negative-high)',
    textDecorationSkipInk: 'none',
  },
  '.cm-lintRange-info': { backgroundImage: 'none', textDecoration: 'underline dotted var(--accent)' },
  '.cm-lint-marker': { content: 'none', width: '0.55em', height: '0.55em', marginTop: '0.45em' },
  '.cm-lint-marker-error': { backgroundColor: 'var(--shade-negative-high)' },
  '.cm-lint-marker-warning': { border: '2px solid var(--shade-negative-high)' },
  '.cm-lint-marker-info': { border: '1px solid var(--accent)', borderRadius: '50%' },
  '.cm-placeholder': { color: 'var(--ink-faint)' },
  '.cm-tooltip': { backgroundColor: 'var(--paper)', color: 'var(--ink)', border: '1px solid var(--rule-strong)' },
  '.cm-diagnostic': { fontFamily: 'var(--sans)', whiteSpace: 'pre-wrap', maxWidth: '32rem' },
  '.cm-diagnosticAction': { backgroundColor: 'var(--accent)', color: 'var(--on-accent)', borderRadius: '0.25rem' },
});

function marked(
  diagnostics: readonly Diagnostic[],
  length: number,
  onRepair: (repair: Repair) => void,
): Marked[] {
  return diagnostics
    .filter(({ from }) => from <= length)
    .map((found) => ({
      from: found.from,
      to: Math.min(Math.max(found.to, found.from), length),
      severity: found.severity === 'note' ? 'info' : found.severity,
      message: `${found.message} ${expectedIn(found)}`.trim(),
      actions: found.repairs.map((repair) => ({ name: repair.label, apply: () => { onRepair(repair); } })),
    }));
}

export function Editor(props: EditorProps) {
  const place = useRef<HTMLDivElement>(null);
  const view = useRef<EditorView | null>(null);
  const latest = useRef(props);
  latest.current = props;

  useEffect(() => {
    if (place.current === null) return undefined;
    const editor = new EditorView({
      parent: place.current,
      state: EditorState.create({
        doc: latest.current.text.value,
        extensions: [
          lineNumbers(),
          history(),
          drawSelection(),
          keymap.of([...defaultKeymap, ...historyKeymap]),
          lintGutter(),
          placeholder(latest.current.hint),
          theme,
          EditorView.contentAttributes.of({
            'aria-label': latest.current.label,
            spellcheck: 'false',
            autocapitalize: 'off',
            autocorrect: 'off',
          }),
          EditorView.updateListener.of((update) => {
            if (update.docChanged) latest.current.onText(update.state.doc.toString());
          }),
          EditorView.domEventHandlers({
            paste: (event) => {
              const pasted = event.clipboardData?.getData('text/plain') ?? '';
              if (pasted === '' || !latest.current.onPaste(pasted)) return false;
              event.preventDefault();
              return true;
            },
            // Files are opened by the page as a whole.
            drop: (event) => (event.dataTransfer?.files.length ?? 0) > 0,
          }),
        ],
      }),
    });
    view.current = editor;
    latest.current.onReady({
      change: (replacement) => {
        editor.dispatch({ changes: replacement, annotations: isolateHistory.of('full') });
      },
      undo: () => { undo(editor); },
      redo: () => { redo(editor); },
      show: (from, to) => {
        const { length } = editor.state.doc;
        editor.dispatch({
          selection: { anchor: Math.min(from, length), head: Math.min(to, length) },
          effects: EditorView.scrollIntoView(Math.min(from, length), { y: 'center' }),
        });
        editor.focus();
      },
    });
    // A document opened from elsewhere; one undo brings the former text back.
    // Within the same turn as the change, or a late echo would undo typing.
    const unfollow = effect(() => {
      const text = latest.current.text.value;
      const { doc } = editor.state;
      if (doc.length === text.length && doc.toString() === text) return;
      editor.dispatch({ changes: { from: 0, to: doc.length, insert: text } });
    });
    return () => {
      unfollow();
      view.current = null;
      editor.destroy();
    };
  }, []);

  useEffect(() => {
    const editor = view.current;
    if (editor === null || props.diagnostics === undefined) return;
    const list = marked(props.diagnostics, editor.state.doc.length, (repair) => {
      latest.current.onRepair(repair);
    });
    editor.dispatch(setDiagnostics(editor.state, list));
  }, [props.diagnostics]);

  return <div ref={place} class="editor" />;
}
