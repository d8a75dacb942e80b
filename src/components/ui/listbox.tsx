import clsx from 'clsx';
import { Select as RadixSelect } from 'radix-ui';
import type { ReactNode } from 'react';
import { Caret } from './caret.tsx';

export interface Option {
  value: string;
  label: ReactNode;
  /** Second, quieter part of the line. */
  note?: string;
}

export interface SelectProps {
  value: string;
  options: readonly Option[];
  onChange: (value: string) => void;
  /** Accessible name where no label points at the control. */
  label?: string;
  id?: string;
  disabled?: boolean;
  'aria-describedby'?: string;
  'aria-invalid'?: true;
  /** `field`: a form control. `inline`: dashed underline, inside a sentence. */
  look?: 'field' | 'inline';
  className?: string;
}

const LOOKS = {
  field: 'field flex items-center justify-between gap-2 text-left',
  inline:
    'inline-flex min-h-6 max-w-[260px] items-center gap-1 border-b border-dashed border-est text-table font-medium text-ink data-[state=open]:text-est hover:text-est max-phone:min-h-8',
} as const;

/** A listbox behind a button: arrows, typing and Enter choose. */
export function Select({ value, options, onChange, label, look = 'field', className, ...rest }: SelectProps) {
  return (
    <RadixSelect.Root value={value} onValueChange={onChange} disabled={rest.disabled}>
      <RadixSelect.Trigger
        id={rest.id}
        aria-label={label}
        aria-describedby={rest['aria-describedby']}
        aria-invalid={rest['aria-invalid']}
        className={clsx(LOOKS[look], className)}
      >
        <span className="truncate">
          <RadixSelect.Value />
        </span>
        <span className="text-est">
          <Caret />
        </span>
      </RadixSelect.Trigger>
      <RadixSelect.Portal>
        <RadixSelect.Content
          position="popper"
          sideOffset={4}
          className="z-40 max-h-[min(360px,var(--radix-select-content-available-height))] min-w-[var(--radix-select-trigger-width)] rounded-xs border border-ink bg-sheet text-table text-ink shadow-float"
        >
          <RadixSelect.Viewport className="py-1">
            {options.map((option) => (
              <RadixSelect.Item
                key={option.value}
                value={option.value}
                className="flex min-h-8 cursor-pointer items-center gap-4 px-3 outline-none select-none data-[highlighted]:bg-estw data-[state=checked]:font-semibold max-phone:min-h-10"
              >
                <RadixSelect.ItemText>{option.label}</RadixSelect.ItemText>
                {option.note !== undefined && (
                  <span className="ml-auto text-caption font-normal text-ink3">{option.note}</span>
                )}
              </RadixSelect.Item>
            ))}
          </RadixSelect.Viewport>
        </RadixSelect.Content>
      </RadixSelect.Portal>
    </RadixSelect.Root>
  );
}
