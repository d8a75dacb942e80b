import clsx from 'clsx';
import type { ReactNode } from 'react';
import type { AveragingCheck } from '../../../shared/estimate.ts';

export type MarkKind = 'fits' | 'contradicts' | 'unknown' | 'none';

const TONES: Record<MarkKind, string> = {
  fits: 'text-ok',
  contradicts: 'text-bad',
  unknown: 'text-warn',
  none: 'text-ink2',
};

const SHAPES: Record<MarkKind, ReactNode> = {
  fits: <circle cx="5" cy="5" r="3.1" fill="currentColor" />,
  contradicts: <path d="M5 .6 9.4 5 5 9.4.6 5z" fill="currentColor" />,
  unknown: <circle cx="5" cy="5" r="2.8" fill="none" stroke="var(--warn-g)" strokeWidth="1.4" />,
  none: <path d="M1.5 5h7" stroke="currentColor" strokeWidth="1.4" />,
};

/** The mark that goes with a verdict of the averaging check. */
export const markOfVerdict: Record<AveragingCheck['verdict'], MarkKind> = {
  declared: 'fits',
  other: 'contradicts',
  none: 'contradicts',
  undetermined: 'unknown',
};

/** A shape with words: dot fits, diamond contradicts, ring unknown, dash doesn't apply. */
export function Mark({
  kind,
  children,
  className,
}: {
  kind: MarkKind;
  children: ReactNode;
  className?: string;
}) {
  return (
    <span className={clsx('inline-flex items-baseline gap-2', TONES[kind], className)}>
      <svg aria-hidden="true" width="10" height="10" viewBox="0 0 10 10" className="shrink-0 self-center">
        {SHAPES[kind]}
      </svg>
      <span>{children}</span>
    </span>
  );
}
