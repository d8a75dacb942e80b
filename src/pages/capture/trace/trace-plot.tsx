import 'uplot/dist/uPlot.min.css';
import { useEffect, useEffectEvent, useRef, useState } from 'react';
import uPlot from 'uplot';
import type { Points } from '../../../../shared/capture.ts';
import type { Estimate } from '../../../../shared/estimate.ts';
import { fixed, frequencyDecimals, frequencyScale } from '../../../lib/format.ts';
import { token, useShownTheme } from '../../../lib/theme.ts';
import { drawGround, drawMarks, type Scene } from './draw.ts';
import { plotData } from './plot-data.ts';
import { scaled, type Span } from './zoom.ts';

interface TracePlotProps extends Scene {
  points: Points;
  estimate: Estimate | null;
  span: Span;
  spacingHz: number;
  /** False where nothing may be left out. */
  canBrush: boolean;
  onBrush(brush: Span | null): void;
  onZoom(span: Span): void;
  /** What stands over the plot, given how a frequency maps to pixels from the plot's left. */
  overlay(place: {
    left: number;
    top: number;
    width: number;
    height: number;
    x: (hz: number) => number;
  }): React.ReactNode;
}

const LEAST_DRAG_PX = 4;

/** The plot of the shown span. Dragging marks a span, dragging with Shift or the wheel zooms. */
export default function TracePlot(props: TracePlotProps) {
  const { points, estimate, span, spacingHz, compact } = props;
  const theme = useShownTheme();
  const host = useRef<HTMLDivElement>(null);
  const plot = useRef<uPlot | null>(null);
  const readout = useRef<HTMLOutputElement>(null);
  const scene = useRef<Scene>(props);
  const [box, setBox] = useState<{ left: number; top: number; width: number; height: number } | null>(null);
  const [wide, setWide] = useState(0);
  const height = compact ? 230 : 330;

  const onPointer = useEffectEvent((kind: 'move' | 'end', fromX: number, toX: number, zooming: boolean) => {
    const u = plot.current;
    if (!u) return;
    const ends = [u.posToVal(fromX, 'x'), u.posToVal(toX, 'x')].map((hz) =>
      Math.min(span.toHz, Math.max(span.fromHz, spacingHz >= 1 ? Math.round(hz) : hz)),
    );
    const marked = { fromHz: Math.min(...ends), toHz: Math.max(...ends) };
    const far = Math.abs(toX - fromX) >= LEAST_DRAG_PX;
    if (zooming) {
      if (kind === 'end' && far) props.onZoom(marked);
    } else if (props.canBrush) props.onBrush(far ? marked : null);
  });
  const onWheel = useEffectEvent((event: WheelEvent) => {
    const u = plot.current;
    if (!u || (!event.ctrlKey && !event.shiftKey && Math.abs(event.deltaX) > Math.abs(event.deltaY))) return;
    event.preventDefault();
    const hz = u.posToVal(event.clientX - u.over.getBoundingClientRect().left, 'x');
    props.onZoom(scaled(span, Math.exp(event.deltaY * 0.0015), hz));
  });

  useEffect(() => {
    const element = host.current;
    if (!element) return;
    const observer = new ResizeObserver(([entry]) => setWide(Math.floor(entry.contentRect.width)));
    observer.observe(element);
    return () => observer.disconnect();
  }, []);

  useEffect(() => {
    scene.current = props;
    plot.current?.redraw(false);
  });

  useEffect(() => {
    const element = host.current;
    if (!element || wide === 0) return;
    const scale = frequencyScale(span.toHz);
    const decimals = frequencyDecimals(Math.max(spacingHz, (span.toHz - span.fromHz) / 400), scale);
    const font = '11px "Noto Sans Mono", monospace';
    const axis = { font, stroke: () => token('ink3'), ticks: { show: false } };
    const options: uPlot.Options = {
      width: wide,
      height,
      padding: [8, compact ? 10 : 62, 0, 0],
      legend: { show: false },
      cursor: { drag: { x: false, y: false, setScale: false }, y: false, points: { show: false } },
      scales: {
        x: { time: false, range: () => [span.fromHz, span.toHz] },
        y: { range: (_u, low, high) => levelRange(low, high) },
      },
      axes: [
        {
          ...axis,
          size: 34,
          gap: 12,
          space: compact ? 70 : 100,
          grid: { show: false },
          values: (_u, ticks) => ticks.map((hz) => fixed(hz / scale.hz, decimals).replaceAll(',', '')),
        },
        {
          ...axis,
          size: compact ? 40 : 48,
          gap: 6,
          space: 38,
          grid: { stroke: () => token('rule2'), width: 1 },
          values: (_u, ticks) => ticks.map((db) => fixed(db, 0)),
        },
      ],
      series: [
        {},
        { stroke: () => token('trace'), width: 0.85, points: { show: false }, spanGaps: false },
        { stroke: () => token('trace-x'), width: 0.85, points: { show: false }, spanGaps: false },
      ],
      hooks: {
        ready: [
          ({ over }) =>
            setBox({
              left: over.offsetLeft,
              top: over.offsetTop,
              width: over.offsetWidth,
              height: over.offsetHeight,
            }),
        ],
        drawClear: [(u) => drawGround(u, scene.current)],
        draw: [(u) => drawMarks(u, scene.current)],
        setCursor: [
          (u) => {
            const index = u.cursor.idx;
            if (!readout.current) return;
            const level = index == null ? null : (u.data[1][index] ?? u.data[2][index]);
            readout.current.textContent =
              index == null || level == null
                ? ''
                : `${fixed(u.data[0][index] / scale.hz, Math.min(6, decimals + 1)).replaceAll(',', '')} ${scale.unit}  ${fixed(level, 2)}`;
          },
        ],
      },
    };
    const made = new uPlot(options, plotData(points, estimate?.exclusions ?? []), element);
    plot.current = made;
    const { over } = made;
    over.style.touchAction = 'pan-y';
    over.style.cursor = 'crosshair';
    let drag: { fromX: number; zooming: boolean; id: number } | null = null;
    const at = (event: PointerEvent) => event.clientX - over.getBoundingClientRect().left;
    const down = (event: PointerEvent) => {
      if (event.button !== 0) return;
      drag = { fromX: at(event), zooming: event.shiftKey, id: event.pointerId };
      over.setPointerCapture(event.pointerId);
    };
    const move = (event: PointerEvent) => {
      if (drag?.id === event.pointerId && Math.abs(at(event) - drag.fromX) >= LEAST_DRAG_PX)
        onPointer('move', drag.fromX, at(event), drag.zooming);
    };
    const up = (event: PointerEvent) => {
      if (drag?.id !== event.pointerId) return;
      onPointer('end', drag.fromX, at(event), drag.zooming);
      drag = null;
    };
    const cancel = () => (drag = null);
    const wheel = (event: WheelEvent) => onWheel(event);
    over.addEventListener('pointerdown', down);
    over.addEventListener('pointermove', move);
    over.addEventListener('pointerup', up);
    over.addEventListener('pointercancel', cancel);
    over.addEventListener('wheel', wheel, { passive: false });
    return () => {
      plot.current = null;
      made.destroy();
    };
  }, [points, estimate?.exclusions, span.fromHz, span.toHz, spacingHz, wide, height, compact, theme]);

  return (
    <div className="relative">
      <div className="flex justify-between text-caption text-ink3">
        <span>
          {estimate?.input.unit ?? points.unit}
          {axisWords(estimate)}
        </span>
        <output ref={readout} aria-hidden="true" className="font-mono" />
      </div>
      <div ref={host} style={{ minHeight: height }} aria-hidden="true" />
      {box && (
        <div
          className="pointer-events-none absolute"
          style={{
            left: box.left,
            bottom: height - box.top - box.height,
            width: box.width,
            height: box.height,
          }}
        >
          {props.overlay({ ...box, x: (hz) => ((hz - span.fromHz) / (span.toHz - span.fromHz)) * box.width })}
        </div>
      )}
      <span className={`absolute right-0 text-caption text-ink3 ${compact ? '-bottom-4' : 'bottom-0'}`}>
        {frequencyScale(span.toHz).unit}
      </span>
    </div>
  );
}

function axisWords(estimate: Estimate | null): string {
  const rbwHz = estimate?.settings.rbwHz?.value;
  if (rbwHz === undefined || estimate?.input.unit === 'dBm/Hz') return '';
  const { hz, unit } = frequencyScale(rbwHz);
  return ` in the ${Number((rbwHz / hz).toPrecision(3))} ${unit} filter`;
}

function levelRange(low: number, high: number): [number, number] {
  if (!Number.isFinite(low) || !Number.isFinite(high)) return [-120, -60];
  const room = Math.max(2, (high - low) * 0.08);
  return [low - room, high + room];
}
