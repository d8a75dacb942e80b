import type { KeyboardEvent, PointerEvent } from 'react';
import { fixed } from '../../../lib/format.ts';
import type { Span } from './zoom.ts';

interface BrushHandlesProps {
  brush: Span;
  whole: Span;
  stepHz: number;
  height: number;
  x(hz: number): number;
  width: number;
  shown: Span;
  onChange(brush: Span): void;
}

/** The two ends of the marked span: dragged, or moved by the arrow keys (with Shift ten points at a time). */
export function BrushHandles({ brush, whole, stepHz, height, x, width, shown, onChange }: BrushHandlesProps) {
  const limited = (hz: number) => Math.min(whole.toHz, Math.max(whole.fromHz, hz));
  const moved = (end: keyof Span, hz: number) => {
    const next = { ...brush, [end]: limited(hz) };
    if (next.fromHz <= next.toHz) onChange(next);
  };
  const onKey = (end: keyof Span) => (event: KeyboardEvent) => {
    const direction =
      event.key === 'ArrowLeft' || event.key === 'ArrowDown'
        ? -1
        : event.key === 'ArrowRight' || event.key === 'ArrowUp'
          ? 1
          : 0;
    if (direction === 0) return;
    event.preventDefault();
    moved(end, brush[end] + direction * (event.shiftKey ? 10 : 1) * stepHz);
  };
  const onDrag = (end: keyof Span) => (event: PointerEvent<HTMLDivElement>) => {
    if (!event.currentTarget.hasPointerCapture(event.pointerId)) return;
    const frame = event.currentTarget.parentElement?.getBoundingClientRect();
    if (frame)
      moved(end, shown.fromHz + ((event.clientX - frame.left) / width) * (shown.toHz - shown.fromHz));
  };
  return (['fromHz', 'toHz'] as const).map((end) => (
    <div
      key={end}
      role="slider"
      tabIndex={0}
      aria-label={end === 'fromHz' ? 'Lower end of the marked span' : 'Upper end of the marked span'}
      aria-valuemin={whole.fromHz / 1e6}
      aria-valuemax={whole.toHz / 1e6}
      aria-valuenow={brush[end] / 1e6}
      aria-valuetext={`${fixed(brush[end] / 1e6, 4)} MHz`}
      className="pointer-events-auto absolute w-6 -translate-x-1/2 cursor-ew-resize touch-none"
      style={{ left: x(brush[end]), top: 0, height }}
      onKeyDown={onKey(end)}
      onPointerDown={(event) => event.currentTarget.setPointerCapture(event.pointerId)}
      onPointerMove={onDrag(end)}
    >
      <span className="absolute top-0 left-1/2 h-full w-px bg-warn-g" />
      <span className="absolute top-1/2 left-1/2 h-4 w-1.5 -translate-x-1/2 -translate-y-1/2 border border-warn-g bg-sheet" />
    </div>
  ));
}
