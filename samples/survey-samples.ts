import type { CaptureSpec, SpurSpec } from '../tests/support/simulator/spec.ts';
import { cells, traceText } from './forms.ts';
import { SUPPLY, type Sample } from './sample.ts';

/** A receiver's filter that is 9 kHz wide at -6 dB is narrower by the root of two at -3 dB. */
const RBW_6DB_HZ = 9e3;
const POINTS = 4001;
const SWEEP_TIME_S = 2;

const survey = (spec: Partial<CaptureSpec> & { seed: number }): CaptureSpec => ({
  startHz: 100e3,
  stopHz: 30e6,
  points: POINTS,
  rbwHz: RBW_6DB_HZ / Math.SQRT2,
  filter: { shape: 'gaussian' },
  mode: { kind: 'swept', dwellInRbw: (SWEEP_TIME_S / POINTS) * (RBW_6DB_HZ / Math.SQRT2) },
  detector: 'average',
  averagingScale: 'power',
  sweeps: 10,
  densityDbmPerHz: -121.9,
  roundingDb: 0.01,
  ...spec,
});

/** Harmonics of a switcher, falling by `fallDb` per octave. */
const harmonics = (fundamentalHz: number, count: number, firstDbm: number, fallDb: number): SpurSpec[] =>
  Array.from({ length: count }, (_, i) => ({
    hz: fundamentalHz * (i + 1),
    levelDbm: firstDbm - fallDb * Math.log2(i + 1) - (i % 2 === 1 ? 3 : 0),
  }));

export const surveySamples: Sample[] = [
  {
    file: 'survey_c_noload.txt',
    name: 'Bench supply, rev C, no load',
    campaign: SUPPLY,
    uploader: 'technician',
    settings: { filterShape: 'gaussian', levelUncertaintyDb: 0.25 },
    shows: 'A floor that falls by 6 dB across the span under 41 harmonics of a 720 kHz switcher.',
    form: 'tab, preamble `key<tab>value`, axis in MHz',
    spec: survey({ seed: 3001, tiltDb: -6, spurs: harmonics(720e3, 41, -52, 3) }),
    write: (capture) =>
      traceText({
        preamble: [
          'Start frequency\t100 kHz',
          'Stop frequency\t30 MHz',
          'RBW\t9 kHz',
          'RBW kind\t-6 dB',
          'Detector\tRMS',
          'Average type\tPower',
          'Sweep count\t10',
          'Sweep time\t2 s',
          'Date\t2026-11-30 11:40',
          '',
        ],
        header: ['Frequency [MHz]\tLevel [dBm]'],
        columns: [cells(capture.frequencyHz, 6, 1e6), cells(capture.levelDbm, 2)],
        delimiter: '\t',
      }),
  },
  {
    file: 'survey_c_2a.txt',
    name: 'Bench supply, rev C, 2 A',
    campaign: SUPPLY,
    uploader: 'technician',
    settings: { filterShape: 'gaussian', levelUncertaintyDb: 0.25 },
    shows: 'The same supply loaded: 28 harmonics of 1.06 MHz, a hump at 9 MHz; exported in steps of 0.1 dB.',
    form: 'runs of blanks, preamble `key: value unit`, axis in MHz',
    spec: survey({
      seed: 3002,
      densityDbmPerHz: -121.6,
      tiltDb: -3,
      humps: [{ centreHz: 9e6, widthHz: 2.5e6, heightDb: 1.5 }],
      spurs: harmonics(1.06e6, 28, -48, 3),
      roundingDb: 0.1,
    }),
    write: (capture) =>
      traceText({
        preamble: [
          'Start: 100 kHz',
          'Stop: 30 MHz',
          'RBW: 9 kHz',
          'RBW kind: -6 dB',
          'Detector: RMS',
          'Average type: power',
          'Sweep count: 10',
          'Sweep time: 2 s',
          'Date: 2026-11-30 12:05',
          '',
        ],
        header: [' Frequency (MHz)   Level (dBm)'],
        columns: [
          cells(capture.frequencyHz, 6, 1e6).map((text) => text.padStart(16)),
          cells(capture.levelDbm, 1).map((text) => text.padStart(13)),
        ],
        delimiter: ' ',
      }),
  },
];
