import { useEffect, useId, useRef, useState, type ReactNode } from 'react';
import { classNames } from './class-names.ts';

interface MenuProps {
  /** What the button shows. */
  label: ReactNode;
  /** What it is for, when the label alone does not say. */
  name?: string;
  buttonClassName: string;
  align?: 'left' | 'right';
  children: (close: () => void) => ReactNode;
}

/** A button with a panel of links or buttons below it; Escape or a click elsewhere closes it. */
export function Menu({ label, name, buttonClassName, align = 'left', children }: MenuProps) {
  const id = useId();
  const [open, setOpen] = useState(false);
  const root = useRef<HTMLDivElement>(null);
  const button = useRef<HTMLButtonElement>(null);

  useEffect(() => {
    if (!open) return;
    const handlePointer = (event: PointerEvent) => {
      if (!root.current?.contains(event.target as Node)) setOpen(false);
    };
    document.addEventListener('pointerdown', handlePointer);
    return () => document.removeEventListener('pointerdown', handlePointer);
  }, [open]);

  const wasOpen = useRef(false);
  useEffect(() => {
    // A closed panel must not leave the focus nowhere.
    if (wasOpen.current && !open && document.activeElement === document.body) button.current?.focus();
    wasOpen.current = open;
  }, [open]);

  const close = () => setOpen(false);

  return (
    // Escape is caught for whatever inside has the focus; the interactive parts are the button and its panel.
    // eslint-disable-next-line jsx-a11y/no-static-element-interactions
    <div
      ref={root}
      className="relative"
      onKeyDown={(event) => {
        if (event.key === 'Escape' && open) close();
      }}
      onBlur={(event) => {
        if (open && event.relatedTarget && !root.current?.contains(event.relatedTarget)) setOpen(false);
      }}
    >
      <button
        ref={button}
        type="button"
        aria-expanded={open}
        aria-controls={id}
        aria-label={name}
        className={buttonClassName}
        onClick={() => setOpen(!open)}
      >
        {label}
        <span aria-hidden> ▾</span>
      </button>
      <div
        id={id}
        hidden={!open}
        className={classNames(
          'absolute top-full z-20 mt-1.5 w-max max-w-[calc(100vw-32px)] min-w-56 rounded border bg-paper p-1.5 text-ink',
          align === 'right' ? 'right-0' : 'left-0',
        )}
      >
        {open && children(close)}
      </div>
    </div>
  );
}

/** The look of a line in a menu. */
export const menuLine =
  'flex w-full min-h-9 flex-col justify-center rounded-sm px-2.5 py-1.5 text-left text-sm text-ink no-underline hover:bg-bone focus-visible:-outline-offset-2';
