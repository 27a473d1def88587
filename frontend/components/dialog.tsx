import { useEffect, useId, useRef, type ReactNode } from 'react';
import { classNames } from './class-names.ts';

interface DialogProps {
  title: string;
  onClose: () => void;
  /** Wider, for comparisons and tables. */
  wide?: boolean;
  children: ReactNode;
  /** Buttons, the act at the right. */
  footer?: ReactNode;
  /** Cannot be left by Escape, when leaving would lose what it asks for. */
  binding?: boolean;
}

/** A modal dialog while it is on the page. The browser keeps the focus inside and gives it back. */
export function Dialog({ title, onClose, wide = false, children, footer, binding = false }: DialogProps) {
  const element = useRef<HTMLDialogElement>(null);
  const titleId = useId();

  useEffect(() => {
    const dialog = element.current;
    const opener = document.activeElement;
    if (dialog && !dialog.open) dialog.showModal();
    return () => {
      if (opener instanceof HTMLElement && opener.isConnected) opener.focus();
    };
  }, []);

  return (
    <dialog
      ref={element}
      aria-labelledby={titleId}
      className={classNames(
        'm-auto max-h-[calc(100dvh-32px)] w-[calc(100vw-32px)] overflow-auto rounded border bg-paper p-0 text-ink',
        wide ? 'max-w-4xl' : 'max-w-xl',
      )}
      onCancel={(event) => {
        event.preventDefault();
        if (!binding) onClose();
      }}
    >
      <div className="flex flex-col gap-3 px-5 py-4">
        <h2 id={titleId}>{title}</h2>
        {children}
        {footer && <div className="mt-2 flex flex-wrap justify-end gap-3">{footer}</div>}
      </div>
    </dialog>
  );
}
