import clsx from 'clsx';
import type { ReactNode } from 'react';

export type ChipTone = 'plain' | 'est' | 'ok' | 'bad' | 'warn';

const TONES: Record<ChipTone, string> = {
  plain: 'border-rule text-ink2',
  est: 'border-est text-est',
  ok: 'border-transparent bg-okw text-ok',
  bad: 'border-transparent bg-badw text-bad',
  warn: 'border-transparent bg-warnw text-warn',
};

/** A state. Chips are for nothing else. */
export function Chip({ tone = 'plain', children }: { tone?: ChipTone; children: ReactNode }) {
  return (
    <span
      className={clsx('inline-block rounded-xs border px-[6px] text-caption whitespace-nowrap', TONES[tone])}
    >
      {children}
    </span>
  );
}
