import { defaultKeymap, history, historyKeymap } from '@codemirror/commands';
import { markdown } from '@codemirror/lang-markdown';
import { lintGutter, setDiagnostics, type Diagnostic } from '@codemirror/lint';
import { EditorState } from '@codemirror/state';
import { EditorView, keymap, lineNumbers } from '@codemirror/view';
import { useEffect, useRef } from 'react';
import type { Problem } from '#lib/plan/types.ts';

interface SourceEditorProps {
  source: string;
  /** Raised when the text was replaced from outside (an upload), so that the editor takes it over. */
  generation: number;
  problems: readonly Problem[];
  /** Line to go to when it changes: a problem that was clicked. */
  goTo: { line: number; column: number; at: number } | null;
  onChange: (source: string) => void;
  onSave: () => void;
}

const theme = EditorView.theme({
  '&': {
    fontSize: '0.8rem',
    border: '1px solid var(--pencil)',
    backgroundColor: 'var(--sheet)',
    color: 'var(--ink)',
  },
  '&.cm-focused': { outline: '3px solid var(--marking-blue)', outlineOffset: '1px' },
  '.cm-content': { fontFamily: 'var(--font-figure)', caretColor: 'var(--ink)', paddingBlock: '0.75rem' },
  '.cm-scroller': { minHeight: '24rem', maxHeight: '75vh', lineHeight: '1.6' },
  '.cm-gutters': {
    backgroundColor: 'var(--wash)',
    color: 'var(--pencil)',
    borderRight: '1px solid var(--rule)',
  },
  '.cm-tooltip': { backgroundColor: 'var(--sheet)', color: 'var(--ink)', border: '1px solid var(--ink)' },
  '&.cm-focused .cm-selectionBackground, .cm-selectionBackground': {
    backgroundColor: 'color-mix(in srgb, var(--marking-blue) 25%, transparent) !important',
  },
});

const SEVERITY = { error: 'error', warning: 'warning', advice: 'info' } as const;

/** The text of a plan in an editor that marks problems where they stand. Ctrl-S (Cmd-S) saves; Esc then Tab leaves the field. */
export function SourceEditor({ source, generation, problems, goTo, onChange, onSave }: SourceEditorProps) {
  const place = useRef<HTMLDivElement>(null);
  const view = useRef<EditorView | null>(null);
  const handlers = useRef({ onChange, onSave });
  const initial = useRef(source);
  useEffect(() => {
    handlers.current = { onChange, onSave };
  });

  useEffect(() => {
    if (!place.current) return undefined;
    // In a shadow tree the editor adopts its style sheets, which the page's policy allows; style elements it would not.
    const shadow = place.current.shadowRoot ?? place.current.attachShadow({ mode: 'open' });
    const made = new EditorView({
      parent: shadow,
      root: shadow,
      state: EditorState.create({
        doc: initial.current,
        extensions: [
          lineNumbers(),
          history(),
          markdown(),
          lintGutter(),
          EditorView.lineWrapping,
          theme,
          EditorView.contentAttributes.of({ 'aria-label': 'Text of the plan' }),
          keymap.of([
            {
              key: 'Mod-s',
              preventDefault: true,
              run: () => {
                handlers.current.onSave();
                return true;
              },
            },
            ...defaultKeymap,
            ...historyKeymap,
          ]),
          EditorView.updateListener.of((update) => {
            if (update.docChanged) handlers.current.onChange(update.state.doc.toString());
          }),
        ],
      }),
    });
    view.current = made;
    return () => {
      made.destroy();
      view.current = null;
    };
  }, []);

  // A text from outside replaces the whole; the editor's own changes come back equal and are left alone.
  useEffect(() => {
    const editor = view.current;
    if (editor && editor.state.doc.toString() !== source) {
      editor.dispatch({ changes: { from: 0, to: editor.state.doc.length, insert: source } });
    }
    // eslint-disable-next-line react-hooks/exhaustive-deps -- only a new generation replaces the text
  }, [generation]);

  useEffect(() => {
    const editor = view.current;
    if (!editor) return;
    const { doc } = editor.state;
    const marks = problems.map((problem): Diagnostic => {
      const line = doc.line(Math.min(Math.max(1, problem.line), doc.lines));
      const from = Math.min(line.to, line.from + Math.max(0, problem.column - 1));
      return {
        from,
        to: Math.min(line.to, from + Math.max(1, problem.length)),
        severity: SEVERITY[problem.severity],
        message: [problem.message, problem.hint].filter(Boolean).join(' '),
      };
    });
    editor.dispatch(setDiagnostics(editor.state, marks));
  }, [problems]);

  useEffect(() => {
    const editor = view.current;
    if (!editor || !goTo) return;
    const line = editor.state.doc.line(Math.min(Math.max(1, goTo.line), editor.state.doc.lines));
    const at = Math.min(line.to, line.from + Math.max(0, goTo.column - 1));
    editor.dispatch({ selection: { anchor: at }, scrollIntoView: true });
    editor.focus();
  }, [goTo]);

  return <div ref={place} />;
}
