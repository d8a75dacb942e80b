import type { SettingValues } from '../../shared/settings.ts';
import type { AveragingCheck } from '../../shared/estimate.ts';
import { mixSeed } from '../support/simulator/random.ts';
import type { CaptureSpec, FftMode, SpurSpec } from '../support/simulator/spec.ts';

/** One kind of capture: how it is made, what the engine is told of it, and what it should answer. */
export interface Cell {
  name: string;
  spec: Omit<CaptureSpec, 'seed'>;
  stated: SettingValues;
  verdict: AveragingCheck['verdict'];
  /** Which averaging the check should name where the verdict is `other`. */
  fits?: AveragingCheck['fits'];
  /** Error of the density if the declaration were believed, published or from the simulator, dB. */
  levelErrorDb?: number;
  /** What is judged of the density: its interval; nothing (wrong or missing declaration); that it is stopped. */
  density: 'interval' | 'ignored' | 'stopped';
}

type Changes = Partial<CaptureSpec> & {
  /** Point spacing over RBW. */
  spacing?: number;
  dwell?: number;
};
type Expectation = Partial<Pick<Cell, 'verdict' | 'fits' | 'levelErrorDb' | 'density'>> & {
  /** Statements that differ from the truth; undefined: not stated. */
  says?: { [Name in keyof SettingValues]: SettingValues[Name] | undefined };
};

const RBW_HZ = 10e3;
const START_HZ = 100e6;
const DENSITY = -140;

const WINDOW_SHAPES = {
  gaussian: 'gaussian',
  rectangular: 'fftRectangular',
  hann: 'fftHann',
  hamming: 'fftHamming',
  blackmanHarris: 'fftBlackmanHarris',
  flatTop: 'fftFlatTop',
} as const satisfies Record<FftMode['window'], SettingValues['filterShape']>;

const POLE_SHAPES: SettingValues['filterShape'][] = ['poles1', 'poles2', 'poles3', 'poles4', 'poles5'];

function stated(spec: Omit<CaptureSpec, 'seed'>): SettingValues {
  const { filter, mode, points, rbwHz } = spec;
  const ownShape = filter.shape === 'poles' ? POLE_SHAPES[filter.poles - 1] : filter.shape;
  return {
    rbwHz,
    rbwKind: '3dB',
    filterShape: mode.kind === 'fft' ? WINDOW_SHAPES[mode.window] : ownShape,
    detector: spec.detector,
    averagingScale: spec.averagingScale,
    sweeps: spec.sweeps,
    startHz: spec.startHz,
    stopHz: spec.stopHz,
    statedPoints: points,
    ...(spec.detectorScale ? { detectorScale: spec.detectorScale } : {}),
    ...(spec.vbwHz ? { vbwHz: spec.vbwHz } : {}),
    ...(mode.kind === 'swept' ? { sweepTimeS: (mode.dwellInRbw * points) / rbwHz } : {}),
  };
}

function cell(name: string, changes: Changes, expectation: Expectation = {}): Cell {
  const { spacing = 0.5, dwell = 1, ...rest } = changes;
  const points = rest.points ?? 1001;
  const spec: Omit<CaptureSpec, 'seed'> = {
    startHz: START_HZ,
    stopHz: START_HZ + (points - 1) * spacing * RBW_HZ,
    points,
    rbwHz: RBW_HZ,
    filter: { shape: 'gaussian' },
    mode: { kind: 'swept', dwellInRbw: dwell },
    detector: 'sample',
    averagingScale: 'power',
    sweeps: 20,
    densityDbmPerHz: DENSITY,
    roundingDb: 0.01,
    ...rest,
  };
  const { says = {}, ...expected } = expectation;
  const told = Object.fromEntries(
    Object.entries({ ...stated(spec), ...says }).filter(([, value]) => value !== undefined),
  );
  return { name, spec, stated: told, verdict: 'declared', density: 'interval', ...expected };
}

const poles = (count: number) => ({ shape: 'poles' as const, poles: count });
const fft = (window: FftMode['window'], blocks = 1) => ({ kind: 'fft' as const, window, blocks });
const vbw = (ratio: number) => ({ vbwHz: ratio * RBW_HZ });

/** CW signals `every` RBW apart, `aboveDb` over the noise in the filter, a little off the points. */
const comb = (count: number, every: number, aboveDb: number): SpurSpec[] =>
  Array.from({ length: count }, (_, i) => ({
    hz: START_HZ + (0.613 + i) * every * RBW_HZ,
    levelDbm: DENSITY + 10 * Math.log10(RBW_HZ) + aboveDb - (i % 5) * 3,
  }));

/** Averaged as declared, nothing but noise: filters, detectors, scales, video filters, spacing, count of points. */
const cleanCells: Cell[] = [
  cell('power20-dwell.25', { spacing: 0.1, dwell: 0.25 }),
  cell('power20-dwell2', { spacing: 0.8, dwell: 2 }),
  cell('power1', { sweeps: 1 }),
  cell('power4-401', { sweeps: 4, points: 401 }),
  cell('power100-401', { sweeps: 100, points: 401, dwell: 0.5 }),
  cell('log1', { sweeps: 1, averagingScale: 'log' }),
  cell('log5-401', { sweeps: 5, points: 401, averagingScale: 'log', dwell: 2 }),
  cell('log20-dwell.25', { averagingScale: 'log', spacing: 0.1, dwell: 0.25 }),
  cell('log20-dwell2', { averagingScale: 'log', spacing: 1, dwell: 2 }),
  cell('log100-401', { averagingScale: 'log', sweeps: 100, points: 401, dwell: 0.5 }),
  cell('voltage10', { averagingScale: 'voltage', sweeps: 10 }),
  cell('voltage50-401', { averagingScale: 'voltage', sweeps: 50, points: 401 }),
  cell('poles4-power10', { filter: poles(4), sweeps: 10, dwell: 0.7 }),
  cell('poles4-log20', { filter: poles(4), averagingScale: 'log', dwell: 0.3, spacing: 0.2 }),
  cell('poles1-power20', { filter: poles(1), dwell: 0.5 }),
  cell('poles1-log10', { filter: poles(1), averagingScale: 'log', sweeps: 10 }),
  cell('poles5-log10', { filter: poles(5), averagingScale: 'log', sweeps: 10 }),
  cell('rectangular-power10-401', { filter: { shape: 'rectangular' }, sweeps: 10, points: 401 }),
  cell('rms10-power1', { detector: 'average', sweeps: 1, dwell: 10, spacing: 1 }),
  cell('rms1-power20-401', { detector: 'average', points: 401 }),
  cell('rms.25-power20', { detector: 'average', dwell: 0.25, spacing: 0.1 }),
  cell('rms3-log20-401', { detector: 'average', averagingScale: 'log', dwell: 3, points: 401 }),
  cell('rms5-log1', { detector: 'average', averagingScale: 'log', sweeps: 1, dwell: 5 }),
  cell('logdetector5-log4-401', {
    detector: 'average',
    detectorScale: 'log',
    averagingScale: 'log',
    sweeps: 4,
    dwell: 5,
    points: 401,
  }),
  cell('poles4-rms4-power5', { filter: poles(4), detector: 'average', dwell: 4, sweeps: 5, points: 401 }),
  cell('vbw.1-log1', { ...vbw(0.1), averagingScale: 'log', sweeps: 1, dwell: 5 }),
  cell('vbw.1-log1-dwell20-401', { ...vbw(0.1), averagingScale: 'log', sweeps: 1, dwell: 20, points: 401 }),
  cell('vbw.3-log8-401', { ...vbw(0.3), averagingScale: 'log', sweeps: 8, points: 401, dwell: 2 }),
  cell('vbw1-log1', { ...vbw(1), averagingScale: 'log', sweeps: 1 }),
  cell('vbw1-log10-401', { ...vbw(1), averagingScale: 'log', sweeps: 10, points: 401 }),
  cell('vbw3-log10-401', { ...vbw(3), averagingScale: 'log', sweeps: 10, points: 401 }),
  cell('vbw.1-power1', { ...vbw(0.1), sweeps: 1, dwell: 5 }),
  cell('vbw.3-voltage4-401', { ...vbw(0.3), averagingScale: 'voltage', sweeps: 4, points: 401, dwell: 2 }),
  cell('vbw10-power50-401', { ...vbw(10), sweeps: 50, points: 401, dwell: 0.5 }),
  cell('poles4-vbw.3-log4-401', {
    ...vbw(0.3),
    filter: poles(4),
    averagingScale: 'log',
    sweeps: 4,
    points: 401,
    dwell: 2,
  }),
  cell('fft-gaussian-power20-s.3', { mode: fft('gaussian'), spacing: 0.3 }),
  cell('fft-gaussian-log20-s.5', { mode: fft('gaussian'), averagingScale: 'log', spacing: 0.5 }),
  cell('fft-hann-power10-s.7', { mode: fft('hann'), sweeps: 10, spacing: 0.7 }),
  cell('fft-hann-log20-s.35', { mode: fft('hann'), averagingScale: 'log', spacing: 0.35 }),
  cell('fft-blackmanHarris-power1-s.5', { mode: fft('blackmanHarris'), sweeps: 1 }),
  cell('fft-flatTop-log10-s.25', { mode: fft('flatTop'), averagingScale: 'log', sweeps: 10, spacing: 0.25 }),
  cell('fft-gaussian-power10-s3', { mode: fft('gaussian'), sweeps: 10, spacing: 3, points: 401 }),
  cell('power20-51', { points: 51, dwell: 2 }),
  cell('log10-101', { points: 101, averagingScale: 'log', sweeps: 10, dwell: 0.7 }),
  cell('power1-101', { points: 101, sweeps: 1, dwell: 2 }),
  cell('power4-10001', { points: 10001, sweeps: 4, dwell: 0.5 }),
];

/** Rounded exports, tilted and humped floors, signals. */
const burdenedCells: Cell[] = [
  cell('power20-round.1', { roundingDb: 0.1 }),
  cell('log20-round1', { averagingScale: 'log', roundingDb: 1 }),
  cell('power100-round1-401', { sweeps: 100, points: 401, roundingDb: 1 }),
  cell('power1-round1', { sweeps: 1, roundingDb: 1 }),
  cell('power20-tilt6', { tiltDb: 6 }),
  cell('log20-tilt-3', { averagingScale: 'log', tiltDb: -3 }),
  cell('power1-tilt4', { sweeps: 1, tiltDb: 4 }),
  cell('log20-hump2', {
    averagingScale: 'log',
    humps: [{ centreHz: START_HZ + 200 * RBW_HZ, widthHz: 60 * RBW_HZ, heightDb: 2 }],
  }),
  cell('power20-spurs5', { spurs: comb(5, 95, 30) }),
  cell('log20-spurs5', { averagingScale: 'log', spurs: comb(5, 95, 30) }),
  cell('power1-spurs3', { sweeps: 1, spurs: comb(3, 150, 40) }),
  cell('poles4-log20-spurs5', { filter: poles(4), averagingScale: 'log', spurs: comb(5, 95, 30) }),
  cell('poles1-power20-spurs2', { filter: poles(1), spurs: comb(2, 240, 25) }),
  cell('vbw.1-log1-spurs3', {
    ...vbw(0.1),
    averagingScale: 'log',
    sweeps: 1,
    dwell: 5,
    spurs: comb(3, 150, 30),
  }),
  cell('fft-hann-power20-spurs5', { mode: fft('hann'), spurs: comb(5, 95, 35) }),
  cell('power20-weak3', { spurs: comb(3, 150, 6) }),
  cell('log20-weak3', { averagingScale: 'log', spurs: comb(3, 150, 6) }),
  cell('power20-crowded', { spurs: comb(50, 9.9, 40) }),
  cell('log20-crowded', { averagingScale: 'log', spurs: comb(50, 9.9, 40) }),
  cell('log20-tilt6-spurs5-round.1', {
    averagingScale: 'log',
    tiltDb: 6,
    roundingDb: 0.1,
    spurs: comb(5, 95, 30),
  }),
];

const LOG_5 = -1.8539;
const LOG_20 = -2.3324;
const LOG_100 = -2.4713;

/** Declared otherwise than made. */
const wrongCells: Cell[] = [
  cell(
    'log5-says-power',
    { averagingScale: 'log', sweeps: 5 },
    {
      says: { averagingScale: 'power' },
      verdict: 'other',
      fits: 'log',
      levelErrorDb: LOG_5,
      density: 'ignored',
    },
  ),
  cell(
    'log20-says-power',
    { averagingScale: 'log' },
    {
      says: { averagingScale: 'power' },
      verdict: 'other',
      fits: 'log',
      levelErrorDb: LOG_20,
      density: 'ignored',
    },
  ),
  cell(
    'log20-says-power-dwell.25',
    { averagingScale: 'log', dwell: 0.25, spacing: 0.1 },
    {
      says: { averagingScale: 'power' },
      verdict: 'other',
      fits: 'log',
      levelErrorDb: LOG_20,
      density: 'ignored',
    },
  ),
  cell(
    'log100-says-power',
    { averagingScale: 'log', sweeps: 100 },
    {
      says: { averagingScale: 'power' },
      verdict: 'other',
      fits: 'log',
      levelErrorDb: LOG_100,
      density: 'ignored',
    },
  ),
  cell(
    'poles4-log20-says-power-spurs5',
    { averagingScale: 'log', filter: poles(4), spurs: comb(5, 95, 30) },
    {
      says: { averagingScale: 'power' },
      verdict: 'other',
      fits: 'log',
      levelErrorDb: LOG_20,
      density: 'ignored',
    },
  ),
  cell(
    'log20-says-power-tilt6-round.1',
    { averagingScale: 'log', tiltDb: 6, roundingDb: 0.1 },
    {
      says: { averagingScale: 'power' },
      verdict: 'other',
      fits: 'log',
      levelErrorDb: LOG_20,
      density: 'ignored',
    },
  ),
  cell(
    'power20-says-log',
    {},
    {
      says: { averagingScale: 'log' },
      verdict: 'other',
      fits: 'power',
      levelErrorDb: -LOG_20,
      density: 'ignored',
    },
  ),
  cell(
    'power1-says-power20',
    { sweeps: 1 },
    { says: { sweeps: 20 }, verdict: 'other', fits: 'none', density: 'ignored' },
  ),
  cell('power5-says-power50', { sweeps: 5 }, { says: { sweeps: 50 }, verdict: 'other', density: 'ignored' }),
];

/** Settings that aren't stated. */
const silentCells: Cell[] = [
  cell(
    'power20-no-scale',
    {},
    { says: { averagingScale: undefined }, verdict: 'undetermined', density: 'ignored' },
  ),
  cell(
    'log20-no-scale',
    { averagingScale: 'log' },
    { says: { averagingScale: undefined }, verdict: 'undetermined', density: 'ignored' },
  ),
  cell('power20-no-count', {}, { says: { sweeps: undefined }, verdict: 'undetermined', density: 'ignored' }),
  cell('power1-no-time', { sweeps: 1 }, { says: { sweepTimeS: undefined } }),
  cell('peak10', { detector: 'peak', sweeps: 1, dwell: 10, points: 401 }, { density: 'stopped' }),
];

export const cells: Cell[] = [...cleanCells, ...burdenedCells, ...wrongCells, ...silentCells];

const seedOf = (name: string) => [...name].reduce((hash, letter) => mixSeed(hash, letter.charCodeAt(0)), 1);

/** The spec of a cell's capture number `index`: the same one however many are run, in whatever order. */
export function specOf(cell: Cell, seed: number, index: number): CaptureSpec {
  return { ...cell.spec, seed: mixSeed(seed, seedOf(cell.name), index) };
}
