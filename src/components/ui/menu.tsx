import { DropdownMenu } from 'radix-ui';
import type { ReactNode } from 'react';

export interface MenuItem {
  label: ReactNode;
  /** Quieter second line. */
  note?: string;
  onSelect: () => void;
  disabled?: boolean;
  /** Marks the present choice. */
  current?: boolean;
}

interface MenuProps {
  trigger: ReactNode;
  items: readonly MenuItem[];
  /** Words over the items. */
  heading?: string;
  align?: 'start' | 'end';
  side?: 'top' | 'bottom';
}

/** A menu of actions behind a button. */
export function Menu({ trigger, items, heading, align = 'end', side = 'bottom' }: MenuProps) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger asChild>{trigger}</DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content
          align={align}
          side={side}
          sideOffset={4}
          collisionPadding={12}
          className="z-40 max-h-[var(--radix-dropdown-menu-content-available-height)] min-w-44 overflow-auto rounded-xs border border-ink bg-sheet py-1 text-table text-ink shadow-float"
        >
          {heading !== undefined && (
            <DropdownMenu.Label className="px-3 py-1 text-caption text-ink3">{heading}</DropdownMenu.Label>
          )}
          {items.map((item, index) => (
            <DropdownMenu.Item
              key={index}
              disabled={item.disabled}
              onSelect={item.onSelect}
              className="flex min-h-8 cursor-pointer flex-col justify-center px-3 py-1 outline-none select-none data-[disabled]:cursor-not-allowed data-[disabled]:text-ink3 data-[highlighted]:bg-estw max-phone:min-h-10"
            >
              <span className={item.current === true ? 'font-semibold' : ''}>{item.label}</span>
              {item.note !== undefined && <span className="text-caption text-ink3">{item.note}</span>}
            </DropdownMenu.Item>
          ))}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}
