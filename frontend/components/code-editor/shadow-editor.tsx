import { autocompletion, type CompletionSource } from '@codemirror/autocomplete';
import { json, jsonParseLinter } from '@codemirror/lang-json';
import { lintGutter, linter, type Diagnostic } from '@codemirror/lint';
import { basicSetup, EditorView } from 'codemirror';
import { useEffect, useEffectEvent, useRef } from 'react';
import { editorTheme } from './editor-theme.ts';
import { pointerRange } from './pointer-range.ts';

/** A fault of the text at a JSON Pointer. */
export interface CodeFinding {
  pointer: string;
  message: string;
  severity?: 'error' | 'warning' | 'info';
  /** A part of the string at the pointer, as of an expression. */
  range?: { start: number; end: number };
}

export interface CodeEditorProps {
  label: string;
  value: string;
  onChange?: (value: string) => void;
  /** Asked after a pause in typing; what it finds is marked in the text. */
  check?: (text: string) => Promise<readonly CodeFinding[]>;
  complete?: CompletionSource;
  readOnly?: boolean;
  /** CSS length. */
  height?: string;
  /** Brings the value at a pointer into sight and puts the cursor there; a new object goes there again. */
  goTo?: { pointer: string } | undefined;
}

const parseErrors = jsonParseLinter();

/** Lives in a shadow root: there its styles are constructed sheets, which `style-src 'self'` lets through. */
export function ShadowEditor({
  label,
  value,
  onChange,
  check,
  complete,
  readOnly = false,
  height = '60dvh',
  goTo,
}: CodeEditorProps) {
  const host = useRef<HTMLDivElement>(null);
  const editor = useRef<EditorView>(null);
  const tell = useEffectEvent((text: string) => onChange?.(text));
  const ask = useEffectEvent((text: string) => check?.(text) ?? Promise.resolve([]));
  const initialText = useEffectEvent(() => value);
  const suggestions = useEffectEvent<CompletionSource>((context) => complete?.(context) ?? null);

  useEffect(() => {
    const element = host.current;
    if (!element) return;
    const shadow = element.shadowRoot ?? element.attachShadow({ mode: 'open' });
    const view = new EditorView({
      parent: shadow,
      root: shadow,
      doc: initialText(),
      extensions: [
        basicSetup,
        json(),
        lintGutter(),
        linter(async (present) => diagnostics(present, await ask(present.state.doc.toString())), {
          delay: 500,
        }),
        autocompletion({ override: [(context) => suggestions(context)] }),
        // Said outright, so that a text that cannot be changed is reached too, to scroll it with the keyboard.
        EditorView.contentAttributes.of({ 'aria-label': label, tabindex: '0' }),
        EditorView.editable.of(!readOnly),
        EditorView.lineWrapping,
        EditorView.updateListener.of((update) => {
          if (update.docChanged) tell(update.state.doc.toString());
        }),
        editorTheme,
      ],
    });
    editor.current = view;
    return () => {
      editor.current = null;
      view.destroy();
    };
  }, [label, readOnly]);

  useEffect(() => {
    const view = editor.current;
    if (!view || view.state.doc.toString() === value) return;
    view.dispatch({ changes: { from: 0, to: view.state.doc.length, insert: value } });
  }, [value]);

  useEffect(() => {
    const view = editor.current;
    if (!view || !goTo) return;
    const place = pointerRange(view.state.doc.toString(), goTo.pointer);
    if (!place) return;
    view.dispatch({
      selection: { anchor: place.from },
      effects: EditorView.scrollIntoView(place.from, { y: 'center' }),
    });
    view.focus();
  }, [goTo]);

  return <div ref={host} className="overflow-hidden rounded border border-edge" style={{ height }} />;
}

function diagnostics(view: EditorView, findings: readonly CodeFinding[]): Diagnostic[] {
  const unreadable = parseErrors(view);
  if (unreadable.length > 0) return unreadable;
  const text = view.state.doc.toString();
  return findings.map(({ pointer, message, severity = 'error', range }) => {
    const place = pointerRange(text, pointer) ?? { from: 0, to: Math.min(1, text.length) };
    // The opening quote stands before the first character of the string.
    const from = range ? place.from + 1 + range.start : place.from;
    const to = range ? place.from + 1 + range.end : firstLine(text, place);
    return { from: Math.min(from, text.length), to: Math.min(to, text.length), severity, message };
  });
}

/** A whole object underlined says nothing: its first line does. */
function firstLine(text: string, { from, to }: { from: number; to: number }): number {
  const end = text.indexOf('\n', from);
  return end === -1 ? to : Math.min(to, end);
}
