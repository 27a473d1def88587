import type { ButtonHTMLAttributes, ReactNode } from 'react';
import { Link, type LinkProps } from 'react-router-dom';
import { classNames } from './class-names.ts';

/** `primary` is arterial, one a row; `danger` is its outline, for what stops or voids; `quiet` has no border. */
type Variant = 'primary' | 'plain' | 'danger' | 'quiet';

interface Look {
  variant?: Variant;
  /** 44 px high, for the bench. */
  large?: boolean;
  /** The key that does the same, shown in the button. */
  keyHint?: string;
}

const variants: Record<Variant, string> = {
  primary:
    'border-arterial bg-arterial text-on-arterial font-semibold not-aria-disabled:hover:border-arterial-deep not-aria-disabled:hover:bg-arterial-deep',
  plain: 'border-edge bg-paper text-ink not-aria-disabled:hover:border-ink',
  danger: 'border-arterial bg-paper text-arterial not-aria-disabled:hover:bg-arterial-wash',
  quiet: 'border-transparent bg-transparent text-venous not-aria-disabled:hover:underline',
};

function look({ variant = 'plain', large = false }: Look): string {
  return classNames(
    'inline-flex items-center justify-center gap-2 rounded border text-sm leading-5 no-underline select-none',
    'aria-disabled:cursor-not-allowed aria-disabled:opacity-55',
    large ? 'min-h-11 px-4 text-base' : 'min-h-8 px-3 py-1',
    variants[variant],
  );
}

type ButtonProps = Look &
  Omit<ButtonHTMLAttributes<HTMLButtonElement>, 'disabled'> & {
    /** Off, but still found by keyboard and screen reader; say why beside it. */
    disabled?: boolean;
    /** The act is under way: the button waits and says so. */
    busy?: boolean;
    children: ReactNode;
  };

/** A button. Off or busy it keeps the focus and does nothing. */
export function Button(props: ButtonProps) {
  const {
    variant,
    large: _large,
    keyHint,
    disabled = false,
    busy = false,
    className,
    children,
    onClick,
    ...rest
  } = props;
  const off = disabled || busy;
  return (
    <button
      type="button"
      {...rest}
      aria-disabled={off || undefined}
      data-state={busy ? 'busy' : undefined}
      className={classNames(look(props), className)}
      onClick={(event) => {
        if (off) event.preventDefault();
        else onClick?.(event);
      }}
    >
      {children}
      {busy && <span aria-live="polite">…</span>}
      {keyHint && <Key tone={variant === 'primary' ? 'light' : 'plain'}>{keyHint}</Key>}
    </button>
  );
}

/** A link that looks like a button: it goes somewhere, it does not do something. */
export function ButtonLink(props: Look & LinkProps) {
  const { variant, large: _large, keyHint, className, children, ...rest } = props;
  return (
    <Link {...rest} className={classNames(look(props), className)}>
      {children}
      {keyHint && <Key tone={variant === 'primary' ? 'light' : 'plain'}>{keyHint}</Key>}
    </Link>
  );
}

/** A key of the keyboard. */
export function Key({
  children,
  tone = 'plain',
}: {
  children: ReactNode;
  tone?: 'plain' | 'light' | 'band';
}) {
  const tones = {
    plain: 'border-edge bg-bone text-ink',
    light: 'border-current text-current',
    band: 'border-band-edge text-chalk-soft',
  };
  return (
    <kbd className={classNames('rounded-sm border border-b-2 px-1 font-mono text-xs leading-4', tones[tone])}>
      {children}
    </kbd>
  );
}
