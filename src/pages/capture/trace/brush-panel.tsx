import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import type { Capture } from '../../../../shared/capture.ts';
import type { Estimate } from '../../../../shared/estimate.ts';
import { whatIfOptions } from '../../../api/estimates.ts';
import { Button } from '../../../components/ui/button.tsx';
import { fixed, frequencyDecimals, frequencyScale, NBSP, plural } from '../../../lib/format.ts';
import type { DraftControls } from '../contract.ts';
import { pointsBetween } from './plot-data.ts';
import type { Span } from './zoom.ts';

interface BrushPanelProps {
  capture: Capture;
  estimate: Estimate | null;
  draft: DraftControls;
  brush: Span;
  onExclude(): void;
  onDrop(): void;
}

const SETTLE_MS = 60;

/** The marked span, once it has stopped moving for a moment. */
function useSettled(brush: Span): Span {
  const [settled, setSettled] = useState(brush);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(brush), SETTLE_MS);
    return () => clearTimeout(timer);
  }, [brush]);
  return settled;
}

/** Says what the density would become without the marked span, before it is left out. */
export function BrushPanel({ capture, estimate, draft, brush, onExclude, onDrop }: BrushPanelProps) {
  const settled = useSettled(brush);
  const { traceIndex, exclusions, settings } = draft.draft;
  const ask = {
    traceIndex,
    settings,
    exclusions: [...exclusions, { ...settled, action: 'exclude' as const }],
  };
  const whatIf = useQuery(whatIfOptions(capture.id, ask));
  const trace = capture.traces[traceIndex];
  const scale = frequencyScale(trace.lastHz);
  const decimals = Math.min(6, frequencyDecimals(trace.spacingHz, scale));
  const points = pointsBetween(brush.fromHz, brush.toHz, trace);
  const without = whatIf.data?.density?.dbmPerHz;
  const now = estimate?.density?.dbmPerHz;
  return (
    <div
      role="group"
      aria-label="Marked span"
      className="pointer-events-auto w-max max-w-full border border-est bg-sheet px-3 py-2 text-caption shadow-float"
    >
      <p>
        <span className="font-mono">
          {fixed(brush.fromHz / scale.hz, decimals)} to {fixed(brush.toHz / scale.hz, decimals)}
        </span>
        {NBSP}
        {scale.unit}, {plural(points, 'point')}
      </p>
      <p aria-live="polite" className="min-h-[17px]">
        {whatIf.isError ? (
          'What it would change couldn’t be computed.'
        ) : without === undefined || now === undefined ? (
          whatIf.isFetching ? (
            ''
          ) : (
            'No density can be given without them.'
          )
        ) : (
          <>
            Without them <span className="font-mono font-medium">{fixed(without, 2)}</span>, a change of{' '}
            <span className="font-mono font-medium">{fixed(without - now, 2, 'always')}</span>
            {NBSP}dB
          </>
        )}
      </p>
      <div className="flex gap-2 pt-1.5">
        <Button shortcut="e" onClick={onExclude}>
          Exclude
        </Button>
        <Button kind="quiet" shortcut="Esc" onClick={onDrop}>
          Keep
        </Button>
      </div>
    </div>
  );
}
