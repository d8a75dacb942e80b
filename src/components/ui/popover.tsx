import { Popover as RadixPopover } from 'radix-ui';
import type { ReactNode } from 'react';

interface PopoverProps {
  trigger: ReactNode;
  children: ReactNode;
  /** Accessible name of the floating part. */
  label: string;
  open?: boolean;
  onOpenChange?: (open: boolean) => void;
  align?: 'start' | 'center' | 'end';
}

/** A small floating sheet tied to a button. */
export function Popover({ trigger, children, label, open, onOpenChange, align = 'start' }: PopoverProps) {
  return (
    <RadixPopover.Root open={open} onOpenChange={onOpenChange}>
      <RadixPopover.Trigger asChild>{trigger}</RadixPopover.Trigger>
      <RadixPopover.Portal>
        <RadixPopover.Content
          aria-label={label}
          align={align}
          sideOffset={6}
          collisionPadding={12}
          className="z-30 max-w-[min(420px,calc(100vw-24px))] rounded-xs border border-ink bg-sheet p-3 text-table text-ink shadow-float outline-none"
        >
          {children}
        </RadixPopover.Content>
      </RadixPopover.Portal>
    </RadixPopover.Root>
  );
}
