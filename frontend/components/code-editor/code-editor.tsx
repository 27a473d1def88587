import { lazy, Suspense } from 'react';
import { Skeleton } from '../states.tsx';
import type { CodeEditorProps } from './shadow-editor.tsx';

export type { CodeEditorProps, CodeFinding } from './shadow-editor.tsx';

const ShadowEditor = lazy(async () => ({ default: (await import('./shadow-editor.tsx')).ShadowEditor }));

/** A JSON editor with completion and errors in place, fetched when first needed. Tab leaves it; it is no trap. */
export function CodeEditor(props: CodeEditorProps) {
  return (
    <Suspense fallback={<Skeleton lines={10} label="Loading the editor" />}>
      <ShadowEditor {...props} />
    </Suspense>
  );
}
