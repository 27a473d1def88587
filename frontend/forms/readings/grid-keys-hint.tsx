import { Key } from '../../components/button.tsx';
import { shortcutsEnabled } from '../../lib/keyboard/key-map.ts';

/** The keys of the grid, where they are used. */
export function GridKeysHint() {
  return (
    <p className="text-sm text-ink-soft">
      <Key>Enter</Key> next reading · <Key>↓</Key> <Key>→</Key> neighbour · paste a column
      {shortcutsEnabled() && (
        <>
          {' '}
          · <Key>x</Key> set aside
        </>
      )}
    </p>
  );
}
