import { useState, type SubmitEvent } from 'react';
import { Button, Key } from '../components/button.tsx';
import { CheckboxField, TextField } from '../components/fields.tsx';
import {
  keysOf,
  knownShortcuts,
  remappedKeys,
  remapShortcut,
  setShortcutsEnabled,
  shortcutsEnabled,
  type Shortcut,
} from '../lib/keyboard/key-map.ts';
import { usePreferences } from '../lib/preferences.ts';

/** Switches single keys off, or puts each on another key (WCAG 2.1.4). */
export function KeySettings() {
  usePreferences();
  const shortcuts = [...knownShortcuts()].sort(
    (a, b) => a.group.localeCompare(b.group) || a.label.localeCompare(b.label),
  );
  return (
    <div className="flex flex-col gap-3">
      <CheckboxField
        label="Single keys act on pages"
        help="They never act while a field has the focus. Tab, Enter and the arrow keys are not affected."
        checked={shortcutsEnabled()}
        onChange={(event) => setShortcutsEnabled(event.target.checked)}
      />
      <table className="w-full text-sm">
        <caption className="sr-only">Keys and what they do</caption>
        <thead>
          <tr className="text-left text-ink-soft">
            <th scope="col" className="py-1 font-medium">
              what
            </th>
            <th scope="col" className="py-1 font-medium">
              keys
            </th>
            <th scope="col">
              <span className="sr-only">change</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {shortcuts.map((shortcut) => (
            <KeyRow
              key={shortcut.id}
              shortcut={shortcut}
              others={shortcuts.filter((other) => other !== shortcut)}
            />
          ))}
        </tbody>
      </table>
      <p className="text-sm text-ink-soft">
        Keys of a page are listed once you have been there on this device.
      </p>
    </div>
  );
}

function KeyRow({ shortcut, others }: { shortcut: Shortcut; others: readonly Shortcut[] }) {
  const [editing, setEditing] = useState(false);
  const [error, setError] = useState<string>();
  const keys = keysOf(shortcut);

  const handleSubmit = (event: SubmitEvent<HTMLFormElement>) => {
    event.preventDefault();
    const value = new FormData(event.currentTarget).get('keys');
    const wanted = typeof value === 'string' ? value.trim().replace(/\s+/g, ' ') : '';
    const problem = problemWith(wanted, shortcut, others);
    setError(problem);
    if (problem) return;
    remapShortcut(shortcut.id, wanted === shortcut.keys ? undefined : wanted);
    setEditing(false);
  };

  return (
    <tr className="border-t border-rule-soft">
      <td className="border-t border-rule-soft py-1.5 pr-3">
        {shortcut.label}
        <span className="block text-xs text-ink-soft">{shortcut.group}</span>
      </td>
      <td className="border-t border-rule-soft py-1.5">
        {editing ? (
          <form id={`keys-${shortcut.id}`} onSubmit={handleSubmit}>
            <TextField
              label={`Keys for ${shortcut.label}`}
              labelHidden
              name="keys"
              defaultValue={keys}
              error={error}
              autoComplete="off"
            />
          </form>
        ) : (
          <span className="flex gap-1">
            {keys.split(' ').map((key, at) => (
              <Key key={`${key}${at}`}>{key}</Key>
            ))}
          </span>
        )}
      </td>
      <td className="border-t border-rule-soft py-1.5 text-right whitespace-nowrap">
        {editing ? (
          <Button type="submit" form={`keys-${shortcut.id}`}>
            Keep
          </Button>
        ) : (
          <Button
            variant="quiet"
            onClick={() => setEditing(true)}
            aria-label={`Change the keys for ${shortcut.label}`}
          >
            Change
          </Button>
        )}
        {!editing && shortcut.id in remappedKeys() && (
          <Button
            variant="quiet"
            onClick={() => remapShortcut(shortcut.id, undefined)}
            aria-label={`Give ${shortcut.label} its own keys back`}
          >
            Undo
          </Button>
        )}
      </td>
    </tr>
  );
}

function problemWith(keys: string, shortcut: Shortcut, others: readonly Shortcut[]): string | undefined {
  if (!/^\S( \S)?$/.test(keys)) return 'Give one character, or two with a space between them: "g n".';
  const taken = others.find((other) => keysOf(other) === keys && sharesPage(other, shortcut));
  return taken && `"${keys}" is taken by "${taken.label}".`;
}

/** Keys of different screens may be the same; those of the frame work everywhere. */
function sharesPage(one: Shortcut, other: Shortcut): boolean {
  const everywhere = ['Anywhere', 'Go'];
  return one.group === other.group || everywhere.includes(one.group) || everywhere.includes(other.group);
}
