import type { Capture } from '../../../shared/capture.ts';
import type { Estimate, ExclusionRequest } from '../../../shared/estimate.ts';

/** What a person has changed and not kept yet. Trace and exclusions live in the URL, settings in the session's storage. */
export interface Draft {
  traceIndex: number;
  exclusions: ExclusionRequest[];
  /** Changed settings by name; null takes one back to what the file says. */
  settings: Record<string, unknown>;
}

/** The draft with everything that changes it. */
export interface DraftControls {
  draft: Draft;
  /** Whether the draft differs from the estimate that is kept. */
  changed: boolean;
  exclude(fromHz: number, toHz: number, reason?: string): void;
  /** Puts automatic exclusions between two frequencies back into the mean. */
  keep(fromHz: number, toHz: number, reason?: string): void;
  /** Takes back requests whose span overlaps these frequencies. */
  forget(fromHz: number, toHz: number): void;
  setSettings(changes: Record<string, unknown>): void;
  setTrace(index: number): void;
  undo(): void;
  redo(): void;
  canUndo: boolean;
  canRedo: boolean;
  /** Throws the whole draft away. */
  reset(): void;
}

/** What a hovered ledger row speaks of on the trace: the id of its line; null: nothing. */
export type Highlight = string | null;

export interface SectionProps {
  capture: Capture;
  /** The estimate that is shown: a what-if, the latest kept one, or an older one; null while none can be had. */
  estimate: Estimate | null;
  draft: DraftControls;
  /** True where an older estimate is looked at, or the person may not change anything. */
  readOnly: boolean;
  /** True while a newer what-if is being computed. */
  pending: boolean;
}
