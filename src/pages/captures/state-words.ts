import type { CaptureState, CaptureSummary } from '../../../shared/capture.ts';
import type { EstimateState } from '../../../shared/estimate.ts';
import type { ChipTone } from '../../components/ui/chip.tsx';

export const CAPTURE_STATES: Record<CaptureState, { word: string; tone: ChipTone }> = {
  received: { word: 'Received', tone: 'plain' },
  reading: { word: 'Reading', tone: 'plain' },
  ready: { word: 'Ready', tone: 'plain' },
  needsSettings: { word: 'Needs settings', tone: 'warn' },
  unreadable: { word: 'Unreadable', tone: 'bad' },
};

export const ESTIMATE_STATES: Record<EstimateState, { word: string; tone: ChipTone }> = {
  working: { word: 'Working', tone: 'plain' },
  submitted: { word: 'Submitted', tone: 'est' },
  verified: { word: 'Verified', tone: 'ok' },
  returned: { word: 'Returned', tone: 'bad' },
  withdrawn: { word: 'Withdrawn', tone: 'plain' },
  superseded: { word: 'Superseded', tone: 'plain' },
};

/** The one state that a row shows: the capture's until it is ready, then its latest estimate's. */
export function rowState({ state, estimate }: CaptureSummary): { word: string; tone: ChipTone } {
  if (state !== 'ready' || estimate === null) return CAPTURE_STATES[state];
  return ESTIMATE_STATES[estimate.state];
}
