import { EditorView } from 'codemirror';

/** Ink on paper in both schemes: the colours of the syntax are made for a light ground. */
export const editorTheme = EditorView.theme({
  '&': { height: '100%', backgroundColor: '#fffdf9', color: '#2e2a26', fontSize: '13px' },
  '.cm-scroller': { fontFamily: '"Noto Sans Mono", monospace', lineHeight: '20px', overflow: 'auto' },
  '&.cm-focused': { outline: '2px solid #2c4a78', outlineOffset: '-2px' },
  '.cm-gutters': { backgroundColor: '#f6f2ea', color: '#6b6257', borderRight: '1px solid #d8d0c0' },
  '.cm-activeLine': { backgroundColor: '#e9eef680' },
  '.cm-activeLineGutter': { backgroundColor: '#e8e2d6' },
  '.cm-tooltip': {
    backgroundColor: '#fffdf9',
    border: '1px solid #8c8272',
    fontFamily: '"Noto Sans", sans-serif',
  },
  '.cm-diagnostic-error': { borderLeftColor: '#98302a' },
  '.cm-diagnostic-warning': { borderLeftColor: '#8a5a00' },
});
