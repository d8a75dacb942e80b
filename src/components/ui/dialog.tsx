import { Dialog as RadixDialog } from 'radix-ui';
import type { ReactNode } from 'react';

interface DialogProps {
  open: boolean;
  onOpenChange: (open: boolean) => void;
  title: string;
  /** One or two sentences under the title. */
  description?: ReactNode;
  children: ReactNode;
  /** False: neither Esc nor a click outside closes it. */
  dismissible?: boolean;
  width?: 'narrow' | 'wide';
}

/** A dialog over the page; the focus stays inside and returns afterwards. */
export function Dialog({
  open,
  onOpenChange,
  title,
  description,
  children,
  dismissible = true,
  width = 'narrow',
}: DialogProps) {
  const hold = (event: Event) => {
    if (!dismissible) event.preventDefault();
  };
  return (
    <RadixDialog.Root open={open} onOpenChange={onOpenChange}>
      <RadixDialog.Portal>
        <RadixDialog.Overlay className="fixed inset-0 z-30 bg-paper/70" />
        <RadixDialog.Content
          onEscapeKeyDown={hold}
          onInteractOutside={hold}
          {...(description === undefined ? { 'aria-describedby': undefined } : {})}
          className={`fixed top-1/2 left-1/2 z-30 max-h-[90vh] w-[calc(100vw-32px)] -translate-x-1/2 -translate-y-1/2 overflow-auto rounded-xs border border-ink bg-sheet p-5 shadow-float ${width === 'narrow' ? 'max-w-[420px]' : 'max-w-[640px]'}`}
        >
          <RadixDialog.Title className="text-[15px] leading-[21px] font-semibold">{title}</RadixDialog.Title>
          {description !== undefined && (
            <RadixDialog.Description className="mt-1 text-table text-ink2">
              {description}
            </RadixDialog.Description>
          )}
          <div className="mt-3">{children}</div>
        </RadixDialog.Content>
      </RadixDialog.Portal>
    </RadixDialog.Root>
  );
}

/** The row of buttons at a dialog's foot; the primary one comes last. */
export function DialogActions({ children }: { children: ReactNode }) {
  return <div className="mt-4 flex flex-wrap justify-end gap-2">{children}</div>;
}
