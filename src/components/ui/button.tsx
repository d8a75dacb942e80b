import clsx from 'clsx';
import type { ComponentProps } from 'react';
import { Kbd } from './kbd.tsx';

type Kind = 'primary' | 'secondary' | 'quiet' | 'danger';

const KINDS: Record<Kind, string> = {
  primary:
    'border-est bg-est text-on-est enabled:hover:border-est-h enabled:hover:bg-est-h enabled:active:bg-est-h',
  secondary: 'border-line bg-sheet text-ink enabled:hover:border-ink enabled:active:bg-hover',
  quiet: 'border-transparent bg-transparent text-est enabled:hover:text-est-h enabled:hover:bg-hover',
  danger: 'border-bad bg-sheet text-bad enabled:hover:bg-badw',
};

/** Looks of a button, for links that act like one. */
export const buttonClass = (kind: Kind = 'secondary') =>
  clsx(
    'inline-flex h-8 items-center justify-center gap-2 rounded-xs border px-3.5 text-table font-medium whitespace-nowrap transition-colors duration-[120ms] select-none max-phone:h-10',
    'disabled:cursor-not-allowed disabled:border-rule disabled:bg-transparent disabled:text-ink3',
    KINDS[kind],
  );

export interface ButtonProps extends ComponentProps<'button'> {
  kind?: Kind;
  /** Key that does the same, shown in a box. */
  shortcut?: string;
}

export function Button({
  kind = 'secondary',
  shortcut,
  className,
  children,
  type = 'button',
  ...rest
}: ButtonProps) {
  return (
    <button type={type} className={clsx(buttonClass(kind), className)} {...rest}>
      {children}
      {shortcut !== undefined && (
        <span className="contents max-phone:hidden">
          <Kbd>{shortcut}</Kbd>
        </span>
      )}
    </button>
  );
}

/** A button that reads as a link inside text or a row. */
export function LinkButton({ className, type = 'button', ...rest }: ComponentProps<'button'>) {
  return <button type={type} className={clsx('link min-h-6 max-phone:min-h-10', className)} {...rest} />;
}
