import type { ReactNode } from 'react';
import type { Capture } from '../../../shared/capture.ts';
import type { Estimate, EstimateState } from '../../../shared/estimate.ts';
import { Button } from '../../components/ui/button.tsx';
import { Chip, type ChipTone } from '../../components/ui/chip.tsx';
import { ExportMenu } from './export-menu.tsx';
import type { useKeep } from './use-keep.ts';

const STATES: Record<EstimateState, { word: string; tone: ChipTone }> = {
  working: { word: 'Working', tone: 'plain' },
  submitted: { word: 'Submitted', tone: 'est' },
  verified: { word: 'Verified', tone: 'ok' },
  returned: { word: 'Returned', tone: 'bad' },
  withdrawn: { word: 'Withdrawn', tone: 'plain' },
  superseded: { word: 'Superseded', tone: 'plain' },
};

interface HeaderActionsProps {
  capture: Capture;
  shown: Estimate | null;
  changed: boolean;
  pending: boolean;
  /** Leaves an older estimate; null where the latest is shown. */
  onLatest: (() => void) | null;
  keepButton: ReactNode;
}

/** State of what is shown, and what can be done with it. */
export function HeaderActions({
  capture,
  shown,
  changed,
  pending,
  onLatest,
  keepButton,
}: HeaderActionsProps) {
  return (
    <>
      <StateChip capture={capture} shown={shown} changed={changed} pending={pending} />
      <span className="contents print:hidden">
        {onLatest !== null && (
          <Button shortcut="Esc" onClick={onLatest}>
            Back to the latest
          </Button>
        )}
        <ExportMenu capture={capture} estimate={shown} />
        <span className="contents max-phone:hidden">{keepButton}</span>
      </span>
    </>
  );
}

function StateChip({
  capture,
  shown,
  changed,
  pending,
}: Pick<HeaderActionsProps, 'capture' | 'shown' | 'changed' | 'pending'>) {
  if (changed) return <Chip tone="warn">{pending ? 'Computing the change' : 'Unsaved change'}</Chip>;
  if (capture.state === 'needsSettings' && shown?.id === capture.estimate?.id) {
    return <Chip tone="warn">Needs settings</Chip>;
  }
  const summary = capture.estimates.find(({ id }) => id === shown?.id);
  if (summary === undefined) return null;
  const { word, tone } = STATES[summary.state];
  return (
    <Chip tone={tone}>
      {word}, estimate {summary.number}
      {summary.number === capture.estimates[0]?.number ? '' : ` of ${capture.estimates[0]?.number}`}
    </Chip>
  );
}

/** Keeps the change as the next estimate. */
export function KeepButton({
  capture,
  keeping,
  disabled,
}: {
  capture: Capture;
  keeping: ReturnType<typeof useKeep>;
  disabled: boolean;
}) {
  const next = (capture.estimates[0]?.number ?? 0) + 1;
  return (
    <Button kind="primary" onClick={keeping.keep} disabled={disabled || keeping.keeping}>
      {keeping.keeping ? 'Keeping…' : `Keep estimate ${next}`}
    </Button>
  );
}
