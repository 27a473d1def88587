import { dismissNotice, useNotices } from '../lib/notices.ts';
import { Button } from './button.tsx';
import { classNames } from './class-names.ts';

/** The one live region: what just happened, said and shown. Stands once in the frame; others call `say`. */
export function NoticeRegion() {
  const notices = useNotices();
  return (
    <div
      role="status"
      data-print="hide"
      className="pointer-events-none fixed right-4 bottom-4 z-30 flex flex-col gap-2"
    >
      {notices.map(({ id, text, tone }) => (
        <div
          key={id}
          className={classNames(
            'pointer-events-auto flex max-w-md items-center gap-3 rounded border bg-paper px-3 py-2 text-sm',
            tone === 'asks' ? 'border-arterial text-ink' : 'border-edge text-ink',
          )}
        >
          {text}
          <Button variant="quiet" onClick={() => dismissNotice(id)} aria-label={`Close: ${text}`}>
            Close
          </Button>
        </div>
      ))}
    </div>
  );
}
