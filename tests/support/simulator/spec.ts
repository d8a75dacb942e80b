import type { FilterSpec } from './resolution-filter.ts';

export type ScaleSpec = 'power' | 'log' | 'voltage';
export type DetectorSpec = 'sample' | 'average' | 'peak' | 'negativePeak';

export interface SpurSpec {
  hz: number;
  /** Level of the CW signal at the filter's centre, at the analyser's input. */
  levelDbm: number;
}

/** A Gaussian hump on the density. */
export interface HumpSpec {
  centreHz: number;
  widthHz: number;
  heightDb: number;
}

/** The analyser as one that sweeps: neighbouring points are correlated by the time between them. */
export interface SweptMode {
  kind: 'swept';
  /** Time spent on a point, times RBW. */
  dwellInRbw: number;
}

/** The analyser as one that transforms blocks: neighbouring points are correlated by the overlap of their bins. */
export interface FftMode {
  kind: 'fft';
  window: FftWindow;
  /** Blocks whose powers are averaged in one sweep, as an average detector does; 1 by default. */
  blocks?: number;
}
export type FftWindow = 'gaussian' | 'rectangular' | 'hann' | 'hamming' | 'blackmanHarris' | 'flatTop';

/** Everything about one capture: what is true, and how the analyser shows it. */
export interface CaptureSpec {
  seed: number;
  startHz: number;
  stopHz: number;
  points: number;
  /** Width of the filter at -3 dB. */
  rbwHz: number;
  /** Not used by `fft`, whose window is the filter. */
  filter: FilterSpec;
  mode: SweptMode | FftMode;
  detector: DetectorSpec;
  /** Scale of an average detector; power by default. */
  detectorScale?: ScaleSpec;
  /** Scale of the video filter and of the averaging over sweeps. */
  averagingScale: ScaleSpec;
  /** Scale of the video filter where it isn't the one of the averaging over sweeps. */
  videoScale?: ScaleSpec;
  /** One-pole video filter at -3 dB; absent: none. */
  vbwHz?: number;
  sweeps: number;
  /** Density of the device at mid-span, before the gain between device and analyser. */
  densityDbmPerHz: number;
  tiltDb?: number;
  humps?: HumpSpec[];
  spurs?: SpurSpec[];
  externalGainDb?: number;
  ownNoiseDbmPerHz?: number;
  /** Step to which levels are rounded on export; 0: none. */
  roundingDb?: number;
  /** Values per 1/RBW at least, in time; by default 8 for values at instants and 12 where what lies between them counts. */
  oversampling?: number;
}

/** What is true of a simulated capture. */
export interface Truth {
  /** Mean of the device's density over the points, in linear power, before the external gain. */
  densityDbmPerHz: number;
  /** What arrives at the analyser in all, its own noise included: the mean over the points. */
  displayedDensityDbmPerHz: number;
  spurs: SpurSpec[];
  spec: CaptureSpec;
}

export interface SimulatedCapture {
  frequencyHz: Float64Array;
  /** Average over the sweeps on the averaging scale. */
  levelDbm: Float64Array;
  /** Highest level of any sweep, point by point. */
  maxHoldDbm: Float64Array;
  /** Lowest level of any sweep, point by point. */
  minHoldDbm: Float64Array;
  truth: Truth;
}
