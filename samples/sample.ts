import type { CaptureSpec, SimulatedCapture } from '../tests/support/simulator/spec.ts';

interface Facts {
  file: string;
  /** Name that the capture gets in the demo. */
  name: string;
  campaign: string;
  uploader: 'engineer' | 'technician';
  /** Settings that are given with the upload because the file can't state them. */
  settings?: Record<string, number | string | boolean>;
  /** What the file is there to show, a sentence. */
  shows: string;
  /** Its form, in words. */
  form: string;
}

/** A file that holds a simulated capture. */
export interface CaptureSample extends Facts {
  spec: CaptureSpec;
  encoding?: 'utf8' | 'latin1';
  write: (capture: SimulatedCapture) => string;
}

/** A file that holds no trace. */
export interface OtherSample extends Facts {
  spec: null;
  text: string;
}

/** One file of the demo scenario. */
export type Sample = CaptureSample | OtherSample;

export const LOT_3 = '70 MHz IF strip, lot 3';
export const SUPPLY = 'Bench supply survey';
export const HOUSEKEEPING = 'Analyser housekeeping';
