import { Key } from '../../components/button.tsx';

/** The keys of the grid, where they are used. */
export function GridKeysHint() {
  return (
    <p className="text-sm text-ink-soft">
      <Key>Enter</Key> next reading · <Key>↓</Key> <Key>→</Key> neighbour · paste a column
    </p>
  );
}
