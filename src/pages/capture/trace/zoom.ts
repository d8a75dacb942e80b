import { useSearchParams } from 'react-router-dom';

export interface Span {
  fromHz: number;
  toHz: number;
}

/** A span moved and shortened so that it lies within another; at least a thousandth of a millionth of it wide. */
export function within(span: Span, whole: Span): Span {
  const widthHz = Math.min(
    Math.max(span.toHz - span.fromHz, (whole.toHz - whole.fromHz) * 1e-6),
    whole.toHz - whole.fromHz,
  );
  const fromHz = Math.min(Math.max(span.fromHz, whole.fromHz), whole.toHz - widthHz);
  return { fromHz, toHz: fromHz + widthHz };
}

/** The span scaled by a factor about a frequency. */
export function scaled(span: Span, factor: number, aboutHz: number): Span {
  return {
    fromHz: aboutHz - (aboutHz - span.fromHz) * factor,
    toHz: aboutHz + (span.toHz - aboutHz) * factor,
  };
}

/** The shown span, kept in the address as `from` and `to` in Hz; the whole span where nothing is said. */
export function useZoom(whole: Span): { span: Span; zoomed: boolean; zoomTo(span: Span | null): void } {
  const [params, setParams] = useSearchParams();
  const fromHz = Number(params.get('from') ?? Number.NaN);
  const toHz = Number(params.get('to') ?? Number.NaN);
  const zoomed =
    Number.isFinite(fromHz) &&
    Number.isFinite(toHz) &&
    toHz > fromHz &&
    toHz > whole.fromHz &&
    fromHz < whole.toHz;
  return {
    span: zoomed ? within({ fromHz, toHz }, whole) : whole,
    zoomed,
    zoomTo: (span) =>
      setParams(
        (before) => {
          const next = new URLSearchParams(before);
          const limited = span === null ? null : within(span, whole);
          const all =
            limited === null || limited.toHz - limited.fromHz >= (whole.toHz - whole.fromHz) * 0.9999;
          if (all) {
            next.delete('from');
            next.delete('to');
          } else {
            next.set('from', String(Math.round(limited.fromHz)));
            next.set('to', String(Math.round(limited.toHz)));
          }
          return next;
        },
        { replace: true, preventScrollReset: true },
      ),
  };
}
