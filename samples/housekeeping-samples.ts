import type { CaptureSpec } from '../tests/support/simulator/spec.ts';
import { cells, traceText } from './forms.ts';
import { HOUSEKEEPING, type CaptureSample, type Sample } from './sample.ts';

const RBW_HZ = 10e3;
const POINTS = 1001;
const SWEEP_TIME_S = 0.05;

const terminated = (spec: Partial<CaptureSpec> & { seed: number }): CaptureSpec => ({
  startHz: 69.5e6,
  stopHz: 70.5e6,
  points: POINTS,
  rbwHz: RBW_HZ,
  filter: { shape: 'gaussian' },
  mode: { kind: 'swept', dwellInRbw: (SWEEP_TIME_S / POINTS) * RBW_HZ },
  detector: 'sample',
  averagingScale: 'power',
  sweeps: 100,
  densityDbmPerHz: -156.5,
  roundingDb: 0.01,
  ...spec,
});

const terminatedFile =
  (lines: string[]): CaptureSample['write'] =>
  (capture) =>
    traceText({
      preamble: [
        '# Start: 69.5 MHz',
        '# Stop: 70.5 MHz',
        '# RBW: 10 kHz',
        '# VBW: 1 MHz',
        '# Detector: sample',
        '# Average type: RMS',
        '# Average count: 100',
        '# Sweep time: 50 ms',
        ...lines,
      ],
      header: ['Frequency (Hz),Level (dBm)'],
      columns: [cells(capture.frequencyHz, 0), cells(capture.levelDbm, 2)],
      delimiter: ',',
    });

const SETTINGS = { rbwKind: '3dB', filterShape: 'gaussian', levelUncertaintyDb: 0.15 };
const FORM = 'comma, preamble `# key: value unit`, axis in Hz';

export const housekeepingSamples: Sample[] = [
  {
    file: 'term_10db_pow100.csv',
    name: 'Terminated input, 10 dB',
    campaign: HOUSEKEEPING,
    uploader: 'technician',
    settings: SETTINGS,
    shows: 'The analyser’s own noise behind 10 dB of attenuation, 100 sweeps in power.',
    form: FORM,
    spec: terminated({ seed: 5001 }),
    write: terminatedFile(['# Attenuation: 10 dB', '# Preamplifier: off', '# Date: 2026-11-27 09:15']),
  },
  {
    file: 'term_pre_on_pow100.csv',
    name: 'Terminated input, preamplifier on',
    campaign: HOUSEKEEPING,
    uploader: 'technician',
    settings: SETTINGS,
    shows: 'Own noise with the preamplifier, 12 dB above k·T0.',
    form: FORM,
    spec: terminated({ seed: 5002, densityDbmPerHz: -161.94 }),
    write: terminatedFile(['# Attenuation: 0 dB', '# Preamplifier: on', '# Date: 2026-11-27 09:22']),
  },
  {
    file: 'rack_10m_210m_20001.csv',
    name: 'IF rack, 10 to 210 MHz, 20,001 points',
    campaign: HOUSEKEEPING,
    uploader: 'engineer',
    settings: { rbwKind: '3dB', filterShape: 'poles4', levelUncertaintyDb: 0.3 },
    shows: 'A wide capture through a filter of four poles: a tilt of 2 dB, ten multiples of a 20 MHz clock.',
    form: 'comma, preamble `key,value`, axis in MHz',
    spec: {
      seed: 5003,
      startHz: 10e6,
      stopHz: 210e6,
      points: 20001,
      rbwHz: 30e3,
      filter: { shape: 'poles', poles: 4 },
      mode: { kind: 'swept', dwellInRbw: (0.6 / 20001) * 30e3 },
      detector: 'sample',
      averagingScale: 'power',
      vbwHz: 1e6,
      sweeps: 10,
      densityDbmPerHz: -139.7,
      tiltDb: 2,
      spurs: Array.from({ length: 10 }, (_, i) => ({ hz: 20e6 * (i + 1), levelDbm: -70 - 1.5 * i })),
      roundingDb: 0.01,
    },
    write: (capture) =>
      traceText({
        preamble: [
          'Start,10 MHz',
          'Stop,210 MHz',
          'RBW,30 kHz',
          'VBW,1 MHz',
          'Detector,sample',
          'Average type,power',
          'Averages,10',
          'Sweep time,600 ms',
          'Attenuation,10 dB',
          'Date,2026-11-26 16:48',
          '',
        ],
        header: ['Frequency (MHz),Level (dBm)'],
        columns: [cells(capture.frequencyHz, 2, 1e6), cells(capture.levelDbm, 2)],
        delimiter: ',',
      }),
  },
];
