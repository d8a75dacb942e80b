import clsx from 'clsx';
import { RadioGroup } from 'radix-ui';
import type { ReactNode } from 'react';

interface SegmentsProps<T extends string> {
  /** null: nothing is chosen yet. */
  value: T | null;
  options: readonly { value: T; label: ReactNode }[];
  onChange: (value: T) => void;
  /** Accessible name where no label points at the group. */
  label?: string;
  id?: string;
  disabled?: boolean;
  'aria-describedby'?: string;
  'aria-invalid'?: true;
}

/** A radio group drawn as joined segments; the chosen one has an underline, a wash and weight. */
export function Segments<T extends string>({
  value,
  options,
  onChange,
  label,
  disabled,
  ...rest
}: SegmentsProps<T>) {
  const choose = (text: string) => {
    const option = options.find((candidate) => candidate.value === text);
    if (option !== undefined) onChange(option.value);
  };
  return (
    <RadioGroup.Root
      value={value ?? ''}
      onValueChange={choose}
      disabled={disabled}
      aria-label={label}
      orientation="horizontal"
      className="flex h-8 rounded-xs border border-line bg-sheet aria-[invalid=true]:border-bad max-phone:h-10"
      {...rest}
    >
      {options.map((option, index) => (
        <RadioGroup.Item
          key={option.value}
          value={option.value}
          className={clsx(
            'flex-1 border-b-2 border-transparent px-2 text-table whitespace-nowrap text-ink2 transition-colors duration-[120ms] enabled:hover:text-ink disabled:text-ink3',
            'data-[state=checked]:border-b-est data-[state=checked]:bg-estw data-[state=checked]:font-semibold data-[state=checked]:text-ink',
            index > 0 && 'border-l border-l-rule',
          )}
        >
          {option.label}
        </RadioGroup.Item>
      ))}
    </RadioGroup.Root>
  );
}
