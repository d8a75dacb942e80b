import { useQuery } from '@tanstack/react-query';
import { lazy, Suspense, useEffect, useEffectEvent, useState } from 'react';
import { pointsOptions } from '../../../api/points.ts';
import { LinkButton } from '../../../components/ui/button.tsx';
import { Select } from '../../../components/ui/listbox.tsx';
import { Section } from '../../../components/ui/section.tsx';
import { ErrorState } from '../../../components/ui/states.tsx';
import { countWords, fixed, frequencyWords, plural } from '../../../lib/format.ts';
import { useKeys } from '../../../lib/keys.ts';
import { usePhone } from '../../../lib/use-media.ts';
import type { Highlight, SectionProps } from '../contract.ts';
import { BrushHandles } from './brush-handles.tsx';
import { BrushPanel } from './brush-panel.tsx';
import { TraceTable } from './trace-table.tsx';
import { scaled, useZoom, type Span } from './zoom.ts';

const TracePlot = lazy(() => import('./trace-plot.tsx'));

interface TraceSectionProps extends SectionProps {
  highlight: Highlight;
  spurHz: number | null;
  onSpur(hz: number | null): void;
}

const BUCKETS = 2000;
const PHONE_BUCKETS = 700;

/** Section 1: the trace with floor, spurs and what is left out; marks spans, zooms, and stands as a table too. */
export function TraceSection({
  capture,
  estimate,
  draft,
  readOnly,
  highlight,
  spurHz,
  onSpur,
}: TraceSectionProps) {
  const compact = usePhone();
  const traceIndex = readOnly ? (estimate?.input.traceIndex ?? 0) : draft.draft.traceIndex;
  const trace = capture.traces[traceIndex];
  const whole: Span = { fromHz: trace.firstHz, toHz: trace.lastHz };
  const { span, zoomed, zoomTo } = useZoom(whole);
  const [brush, setBrush] = useState<Span | null>(null);
  const [table, setTable] = useState(false);
  const points = useQuery(
    pointsOptions(capture.id, traceIndex, {
      ...(zoomed ? { fromHz: span.fromHz, toHz: span.toHz } : {}),
      buckets: compact ? PHONE_BUCKETS : BUCKETS,
    }),
  );
  const spurs = estimate?.spurs ?? [];
  const middleHz = (span.fromHz + span.toHz) / 2;
  const exclude = () => {
    if (brush === null) return false;
    draft.exclude(brush.fromHz, brush.toHz);
    setBrush(null);
  };
  const mark = () => {
    const reach = (span.toHz - span.fromHz) / 40;
    if (!readOnly) setBrush({ fromHz: middleHz - reach, toHz: middleHz + reach });
  };
  const toSpur = (step: 1 | -1) => {
    if (spurs.length === 0) return false;
    const at = spurs.findIndex(({ hz }) => hz === spurHz);
    const next =
      spurs[at === -1 ? (step === 1 ? 0 : spurs.length - 1) : (at + step + spurs.length) % spurs.length];
    onSpur(next.hz);
  };
  useKeys({
    e: exclude,
    b: mark,
    t: () => setTable((shown) => !shown),
    '+': () => zoomTo(scaled(span, 0.5, middleHz)),
    '=': () => zoomTo(scaled(span, 0.5, middleHz)),
    '-': () => zoomTo(scaled(span, 2, middleHz)),
    '0': () => zoomTo(null),
    '[': () => toSpur(-1),
    ']': () => toSpur(1),
    Escape: () => {
      if (brush === null) return false;
      setBrush(null);
    },
  });
  const centreSpur = useEffectEvent((hz: number) => {
    if (zoomed && (hz < span.fromHz || hz > span.toHz)) {
      const half = (span.toHz - span.fromHz) / 2;
      zoomTo({ fromHz: hz - half, toHz: hz + half });
    }
  });
  useEffect(() => {
    if (spurHz !== null) centreSpur(spurHz);
  }, [spurHz]);

  return (
    <Section
      number={1}
      title="Trace"
      aside={
        <span className="inline-flex flex-wrap items-baseline gap-x-4">
          {estimate && (
            <span>
              <span className="font-medium text-ink">{countWords(estimate.input.usedPoints)}</span> of{' '}
              {countWords(trace.points)} points used
            </span>
          )}
          {capture.traces.length > 1 && !readOnly && (
            <Select
              look="inline"
              label="Trace"
              value={String(traceIndex)}
              options={capture.traces.map(({ index, name }) => ({
                value: String(index),
                label: name || `Trace ${index + 1}`,
              }))}
              onChange={(value) => draft.setTrace(Number(value))}
            />
          )}
          {draft.canUndo && <LinkButton onClick={draft.undo}>Undo</LinkButton>}
          {!readOnly && brush === null && <LinkButton onClick={mark}>Leave out a span</LinkButton>}
          {zoomed && <LinkButton onClick={() => zoomTo(null)}>Whole span</LinkButton>}
          <LinkButton aria-pressed={table} onClick={() => setTable(!table)}>
            Table
          </LinkButton>
        </span>
      }
    >
      <p className="sr-only">{summaryOf(estimate, trace.points, whole)}</p>
      {points.isError && (
        <ErrorState
          what="The points couldn’t be loaded."
          error={points.error}
          onRetry={() => void points.refetch()}
        />
      )}
      {points.data === undefined ? (
        <div style={{ height: compact ? 247 : 347 }} className="bg-sheet" aria-busy="true" />
      ) : (
        <Suspense fallback={<div style={{ height: compact ? 247 : 347 }} className="bg-sheet" />}>
          <TracePlot
            points={points.data}
            estimate={estimate}
            span={span}
            spacingHz={trace.spacingHz}
            brush={brush}
            highlight={highlight}
            spurHz={spurHz}
            compact={compact}
            canBrush={!readOnly}
            onBrush={setBrush}
            onZoom={zoomTo}
            overlay={({ height, width, x }) =>
              brush && (
                <>
                  <BrushHandles
                    brush={brush}
                    whole={whole}
                    shown={span}
                    stepHz={trace.spacingHz}
                    height={height}
                    width={width}
                    x={x}
                    onChange={setBrush}
                  />
                  <div
                    className="absolute top-2"
                    style={
                      x(brush.toHz) < width / 2
                        ? { left: Math.max(0, x(brush.toHz) + 14) }
                        : { right: Math.max(0, width - x(brush.fromHz) + 14) }
                    }
                  >
                    <BrushPanel
                      capture={capture}
                      estimate={estimate}
                      draft={draft}
                      brush={brush}
                      onExclude={exclude}
                      onDrop={() => setBrush(null)}
                    />
                  </div>
                </>
              )
            }
          />
        </Suspense>
      )}
      {!readOnly && (
        <p className="text-caption text-ink3 max-phone:hidden">
          Drag marks a span to leave out; the wheel or Shift and drag zooms.
        </p>
      )}
      {table && points.data && <TraceTable points={points.data} exclusions={estimate?.exclusions ?? []} />}
    </Section>
  );
}

function summaryOf(estimate: SectionProps['estimate'], points: number, whole: Span): string {
  const axis = `${plural(points, 'point')} from ${frequencyWords(whole.fromHz, 7)} to ${frequencyWords(whole.toHz, 7)}.`;
  if (estimate === null) return axis;
  const { floor, spurs, input } = estimate;
  const level =
    floor.levelDbm.length > 0
      ? ` The floor reads ${fixed(floor.levelDbm[0], 1)} to ${fixed(floor.levelDbm[floor.levelDbm.length - 1], 1)} ${input.unit}.`
      : '';
  const list = spurs
    .slice(0, 10)
    .map(({ hz, levelDbm }) => `${frequencyWords(hz, 7)} at ${fixed(levelDbm, 1)}`)
    .join(', ');
  return `${axis}${level} ${spurs.length === 0 ? 'No spurs.' : `${plural(spurs.length, 'spur')}: ${list}.`}`;
}
