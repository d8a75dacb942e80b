import { useMemo, useState } from 'react';
import { useSearchParams } from 'react-router-dom';
import type { Capture } from '../../../shared/capture.ts';
import type { Estimate, ExclusionRequest } from '../../../shared/estimate.ts';
import type { DraftControls } from './contract.ts';
import { readAddress, requestsOf, sameRequests, writeAddress } from './draft-address.ts';
import { type Changes, realChanges, settingsMovedOn, storeChanges, storedChanges } from './draft-settings.ts';

/** One state of the draft; null: as in the estimate that is kept. */
interface Snapshot {
  traceIndex: number | null;
  exclusions: ExclusionRequest[] | null;
  settings: Changes;
}

interface History {
  past: Snapshot[];
  future: Snapshot[];
}

const NOTHING: History = { past: [], future: [] };
const MOST_STEPS = 200;

const overlaps = (request: ExclusionRequest, fromHz: number, toHz: number) =>
  request.fromHz <= toHz && request.toHz >= fromHz;

/**
 * The draft on a capture: spans and trace in the address, settings in the session's storage, with undo and redo.
 * @param latest the latest kept estimate, from which the draft starts.
 */
export function useDraft(capture: Capture, latest: Estimate | null): DraftControls {
  const [params, setParams] = useSearchParams();
  const [stored, setStored] = useState(() => storedChanges(capture.id));
  const [history, setHistory] = useState(NOTHING);
  const text = params.toString();
  const address = useMemo(
    () => readAddress(new URLSearchParams(text), capture.traces.length),
    [text, capture.traces.length],
  );
  const base = useMemo(() => requestsOf(latest), [latest]);
  const settings = useMemo(() => realChanges(stored, capture.settings), [stored, capture.settings]);
  const baseTrace = latest?.input.traceIndex ?? 0;
  const now: Snapshot = { ...address, settings };
  const traceIndex = now.traceIndex ?? baseTrace;
  const exclusions = now.exclusions ?? base;

  const show = (next: Snapshot) => {
    storeChanges(capture.id, next.settings);
    setStored(next.settings);
    setParams((before) => writeAddress(before, next), { replace: true, preventScrollReset: true });
  };
  const change = (part: Partial<Snapshot>) => {
    setHistory({ past: [...history.past, now].slice(-MOST_STEPS), future: [] });
    show({ ...now, ...part });
  };
  const changeSpans = (next: ExclusionRequest[]) => {
    if (!sameRequests(next, exclusions)) change({ exclusions: sameRequests(next, base) ? null : next });
  };
  const addSpan = (action: 'exclude' | 'keep', fromHz: number, toHz: number, reason?: string) =>
    changeSpans([
      ...exclusions,
      {
        action,
        fromHz: Math.min(fromHz, toHz),
        toHz: Math.max(fromHz, toHz),
        ...(reason === undefined || reason === '' ? {} : { reason }),
      },
    ]);

  return {
    draft: { traceIndex, exclusions, settings },
    changed:
      latest === null ||
      traceIndex !== baseTrace ||
      !sameRequests(exclusions, base) ||
      Object.keys(settings).length > 0 ||
      settingsMovedOn(capture, latest),
    exclude: (fromHz, toHz, reason) => addSpan('exclude', fromHz, toHz, reason),
    keep: (fromHz, toHz, reason) => addSpan('keep', fromHz, toHz, reason),
    forget: (fromHz, toHz) => changeSpans(exclusions.filter((request) => !overlaps(request, fromHz, toHz))),
    setSettings: (changes) => {
      const next = realChanges({ ...settings, ...changes }, capture.settings);
      if (JSON.stringify(next) !== JSON.stringify(settings)) change({ settings: next });
    },
    setTrace: (index) => {
      if (index !== traceIndex)
        change({
          traceIndex: index === baseTrace ? null : index,
          exclusions: index === baseTrace ? null : [],
        });
    },
    undo: () => {
      const last = history.past.at(-1);
      if (last === undefined) return;
      setHistory({ past: history.past.slice(0, -1), future: [now, ...history.future] });
      show(last);
    },
    redo: () => {
      const [next, ...future] = history.future;
      if (next === undefined) return;
      setHistory({ past: [...history.past, now], future });
      show(next);
    },
    canUndo: history.past.length > 0,
    canRedo: history.future.length > 0,
    reset: () => {
      setHistory(NOTHING);
      show({ traceIndex: null, exclusions: null, settings: {} });
    },
  };
}
