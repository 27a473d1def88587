import { Link } from 'react-router-dom';
import { Button, Key } from '../components/button.tsx';
import { Dialog } from '../components/dialog.tsx';
import { keysOf, type Shortcut } from '../lib/keyboard/key-map.ts';
import { groupBy } from '../lib/group-by.ts';
import { useBoundShortcuts } from '../lib/keyboard/use-shortcut.ts';

/** The keys that work on the page at hand, in groups. */
export function KeysDialog({ onClose }: { onClose: () => void }) {
  const groups = groupBy(useBoundShortcuts(), ({ group }) => group);
  return (
    <Dialog
      title="Keys on this page"
      onClose={onClose}
      footer={
        <Button variant="primary" onClick={onClose}>
          Close
        </Button>
      }
    >
      {[...groups].map(([group, shortcuts]) => (
        <section key={group}>
          <h3 className="mb-1 text-sm">{group}</h3>
          <dl className="grid grid-cols-[max-content_1fr] gap-x-4 gap-y-1 text-sm">
            {shortcuts.map((shortcut) => (
              <KeyLine key={shortcut.id} shortcut={shortcut} />
            ))}
          </dl>
        </section>
      ))}
      <p className="text-sm text-ink-soft">
        Single keys never act while a field has the focus. Switch them off or put them on other keys on the{' '}
        <Link to="/account" className="link" onClick={onClose}>
          account page
        </Link>
        .
      </p>
    </Dialog>
  );
}

function KeyLine({ shortcut }: { shortcut: Shortcut }) {
  return (
    <>
      <dt className="flex gap-1">
        {keysOf(shortcut)
          .split(' ')
          .map((key, at) => (
            <Key key={`${key}${at}`}>{key}</Key>
          ))}
      </dt>
      <dd>{shortcut.label}</dd>
    </>
  );
}
