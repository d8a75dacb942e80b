import clsx from 'clsx';
import type { ReactNode } from 'react';
import type { Severity } from '../../../shared/estimate.ts';

export type MessageTone = 'stopped' | 'caution' | 'waiting' | 'note' | 'done';

const TONES: Record<MessageTone, { word: string; className: string }> = {
  stopped: { word: 'Stopped', className: 'text-bad font-semibold' },
  caution: { word: 'Caution', className: 'text-warn font-semibold' },
  waiting: { word: 'Waiting', className: 'text-warn font-semibold' },
  note: { word: 'Note', className: 'text-ink3' },
  done: { word: 'Done', className: 'text-ink3' },
};

export const toneOfSeverity: Record<Severity, MessageTone> = {
  stop: 'stopped',
  caution: 'caution',
  note: 'note',
};

interface MessageProps {
  tone: MessageTone;
  /** One bold clause, a sentence. */
  title: ReactNode;
  /** Evidence: how it is known, what happened to the data. */
  children?: ReactNode;
  /** Links or buttons. */
  actions?: ReactNode;
  /** Announce it: errors at once, others when there is time. */
  live?: 'off' | 'polite' | 'assertive';
}

/** A finding or message: severity word in a margin, bold clause, evidence, actions. */
export function Message({ tone, title, children, actions, live = 'off' }: MessageProps) {
  return (
    <div
      role={live === 'assertive' ? 'alert' : live === 'polite' ? 'status' : undefined}
      className="grid grid-cols-[62px_minmax(0,1fr)] gap-x-3 border-b border-rule2 py-2.5 max-phone:grid-cols-1"
    >
      <div className={clsx('text-caption leading-5', TONES[tone].className)}>{TONES[tone].word}</div>
      <div className="grid gap-1">
        <div className="text-body font-semibold">{title}</div>
        {children !== undefined && <div className="text-table text-ink2">{children}</div>}
        {actions !== undefined && <div className="flex flex-wrap gap-x-5 text-table">{actions}</div>}
      </div>
    </div>
  );
}
