import type { CaptureSpec } from '../tests/support/simulator/spec.ts';
import { cells, traceText, withComma } from './forms.ts';
import { LOT_3, type CaptureSample, type Sample } from './sample.ts';

const RBW_HZ = 10e3;
const POINTS = 1001;

/** An IF strip's output through cable W-17 (0.35 dB of loss) on an analyser of -156.5 dBm/Hz. */
const strip = (spec: Partial<CaptureSpec> & { seed: number }, sweepTimeS = 0.025): CaptureSpec => ({
  startHz: 69.5e6,
  stopHz: 70.5e6,
  points: POINTS,
  rbwHz: RBW_HZ,
  filter: { shape: 'gaussian' },
  mode: { kind: 'swept', dwellInRbw: (sweepTimeS / POINTS) * RBW_HZ },
  detector: 'sample',
  averagingScale: 'power',
  sweeps: 20,
  densityDbmPerHz: -146.2,
  externalGainDb: -0.35,
  ownNoiseDbmPerHz: -156.5,
  roundingDb: 0.01,
  ...spec,
});

const STRIP_14_SPURS = [
  { hz: 69.75e6, levelDbm: -97.5 },
  { hz: 70e6, levelDbm: -87.9 },
  { hz: 70.25e6, levelDbm: -99.1 },
];

/** What the bench knows and no file says: cable, own noise, level. */
const BENCH = {
  rbwKind: '3dB',
  filterShape: 'gaussian',
  externalGainDb: -0.35,
  externalGainUncertaintyDb: 0.05,
  ownNoiseDbmPerHz: -156.5,
  ownNoiseUncertaintyDb: 0.1,
  levelUncertaintyDb: 0.15,
};

const preamble = (lines: Record<string, string>, takenAt: string) => [
  'Trace export',
  `Date,${takenAt}`,
  'Instrument,HB-SA-02',
  'Start frequency,69500000,Hz',
  'Stop frequency,70500000,Hz',
  'RBW,10,kHz',
  'VBW,1,MHz',
  ...Object.entries(lines).map(([key, value]) => `${key},${value}`),
  'Attenuation,10,dB',
  'Impedance,50,ohm',
  `Points,${POINTS}`,
  '',
];

const commaFile =
  (lines: Record<string, string>, takenAt: string): CaptureSample['write'] =>
  (capture) =>
    traceText({
      preamble: preamble(lines, takenAt),
      header: ['Frequency (Hz),Level (dBm)'],
      columns: [cells(capture.frequencyHz, 0), cells(capture.levelDbm, 2)],
      delimiter: ',',
    });

const COMMA_FORM = 'comma, preamble `key,value,unit`, axis in Hz';

export const stripSamples: Sample[] = [
  {
    file: 'strip14_out_log20.csv',
    name: 'IF strip 14, output, 20 sweeps on the log scale',
    campaign: LOT_3,
    uploader: 'engineer',
    settings: BENCH,
    shows: 'Log averaging, declared so; three CW signals 250 kHz apart.',
    form: COMMA_FORM,
    spec: strip({ seed: 1401, averagingScale: 'log', spurs: STRIP_14_SPURS }),
    write: commaFile(
      { 'Average type': 'Log', Averages: '20', Detector: 'Sample', 'Sweep time': '25,ms' },
      '2026-12-01 10:19:00',
    ),
  },
  {
    file: 'strip14_out_pow20.csv',
    name: 'IF strip 14, output, 20 sweeps on the power scale',
    campaign: LOT_3,
    uploader: 'technician',
    settings: BENCH,
    shows: 'The same output averaged in power: the two densities agree.',
    form: COMMA_FORM,
    spec: strip({ seed: 1402, spurs: STRIP_14_SPURS }),
    write: commaFile(
      { 'Average type': 'Power (RMS)', Averages: '20', Detector: 'Sample', 'Sweep time': '25,ms' },
      '2026-12-01 10:24:00',
    ),
  },
  {
    file: 'strip13_out.csv',
    name: 'IF strip 13, output',
    campaign: LOT_3,
    uploader: 'technician',
    settings: BENCH,
    shows: 'Declared as power averaging of 20, made by log averaging: 2.33 dB low if it is believed.',
    form: COMMA_FORM,
    spec: strip({
      seed: 1301,
      averagingScale: 'log',
      densityDbmPerHz: -146.14,
      spurs: [{ hz: 70e6, levelDbm: -89.3 }],
    }),
    write: commaFile(
      { 'Average type': 'Power (RMS)', Averages: '20', Detector: 'Sample', 'Sweep time': '25,ms' },
      '2026-12-01 09:57:00',
    ),
  },
  {
    file: 'strip12_out_pow50.csv',
    name: 'IF strip 12, output',
    campaign: LOT_3,
    uploader: 'engineer',
    settings: BENCH,
    shows: 'An average (RMS) detector and 50 sweeps in power; one CW signal.',
    form: 'comma, preamble `key: value unit`, axis in MHz, CRLF',
    spec: strip(
      {
        seed: 1201,
        detector: 'average',
        sweeps: 50,
        densityDbmPerHz: -146.41,
        spurs: [{ hz: 70.0021e6, levelDbm: -90.2 }],
      },
      0.1,
    ),
    write: (capture) =>
      traceText({
        preamble: [
          'Centre: 70 MHz',
          'Span: 1 MHz',
          'RBW: 10 kHz',
          'RBW kind: -3 dB',
          'Detector: RMS',
          'Average type: Power',
          'Sweep count: 50',
          'Sweep time: 100 ms',
          'RF attenuation: 10 dB',
          'Date: 2026-11-30 15:42',
          '',
        ],
        header: ['Frequency [MHz],Level [dBm]'],
        columns: [cells(capture.frequencyHz, 4, 1e6), cells(capture.levelDbm, 2)],
        delimiter: ',',
        lineEnd: '\r\n',
      }),
  },
  {
    file: 'strip14_out_vbw1k.csv',
    name: 'IF strip 14, output, one sweep, video filter 1 kHz',
    campaign: LOT_3,
    uploader: 'engineer',
    settings: BENCH,
    shows: 'One sweep on the log scale, smoothed by a video filter of a tenth of the RBW.',
    form: 'semicolon, preamble `key=value`, axis in kHz',
    spec: strip({ seed: 1403, averagingScale: 'log', sweeps: 1, vbwHz: 1e3, spurs: STRIP_14_SPURS }, 1),
    write: (capture) =>
      traceText({
        preamble: [
          'start=69.5 MHz',
          'stop=70.5 MHz',
          'rbw=10 kHz',
          'vbw=1 kHz',
          'detector=sample',
          'average type=log',
          'averages=1',
          'sweep time=1 s',
          'attenuation=10 dB',
          'date=2026-12-01 10:33',
        ],
        header: ['Frequency/kHz;Level/dBm'],
        columns: [cells(capture.frequencyHz, 0, 1e3), cells(capture.levelDbm, 2)],
        delimiter: ';',
      }),
  },
  {
    file: 'strip14_out_peak.csv',
    name: 'IF strip 14, output, peak detector',
    campaign: LOT_3,
    uploader: 'technician',
    settings: BENCH,
    shows: 'A positive-peak trace: indicative only, no density can rest on it.',
    form: COMMA_FORM,
    spec: strip({ seed: 1404, detector: 'peak', sweeps: 1, spurs: STRIP_14_SPURS }, 0.4),
    write: commaFile(
      { 'Average type': 'Power (RMS)', Averages: '1', Detector: 'Positive peak', 'Sweep time': '400,ms' },
      '2026-12-01 10:36:00',
    ),
  },
  {
    file: 'messung_0412.csv',
    name: 'IF strip 9, output, from the other bench',
    campaign: LOT_3,
    uploader: 'technician',
    shows: 'German keys and decimal commas; averaged on the log scale, which the file doesn’t say.',
    form: 'semicolon, decimal comma, preamble `key;value;unit`, axis in MHz, Latin-1, CRLF',
    encoding: 'latin1',
    spec: strip({ seed: 901, averagingScale: 'log', sweeps: 16, densityDbmPerHz: -145.9 }),
    write: (capture) =>
      traceText({
        preamble: [
          'Datum;01.12.2026 09:12',
          'Startfrequenz;69,5;MHz',
          'Stoppfrequenz;70,5;MHz',
          'Auflösungsbandbreite;10;kHz',
          'Videobandbreite;1;MHz',
          'Detektor;Sample',
          'Mittelungen;16',
          'Sweepzeit;25;ms',
          'Dämpfung;10;dB',
          `Messpunkte;${POINTS}`,
          '',
        ],
        header: ['Frequenz [MHz];Pegel [dBm]'],
        columns: [withComma(cells(capture.frequencyHz, 3, 1e6)), withComma(cells(capture.levelDbm, 2))],
        delimiter: ';',
        lineEnd: '\r\n',
      }),
  },
  {
    file: 'strip15_out_single.csv',
    name: 'IF strip 15, output, one sweep',
    campaign: LOT_3,
    uploader: 'technician',
    settings: BENCH,
    shows: 'One sweep, nothing averaged: no scale matters, the linear mean needs no correction.',
    form: COMMA_FORM,
    spec: strip(
      { seed: 1501, sweeps: 1, densityDbmPerHz: -145.8, spurs: [{ hz: 69.9e6, levelDbm: -88 }] },
      0.2,
    ),
    write: commaFile(
      { 'Average type': 'Off', Averages: '1', Detector: 'Sample', 'Sweep time': '200,ms' },
      '2026-12-01 11:02:00',
    ),
  },
  {
    file: 'strip11_levels.txt',
    name: 'IF strip 11, output',
    campaign: LOT_3,
    uploader: 'technician',
    settings: BENCH,
    shows: 'Levels only: the axis follows from start, stop and the count.',
    form: 'one column of levels, preamble `# key: value`',
    spec: strip({
      seed: 1101,
      densityDbmPerHz: -146.08,
      spurs: [
        { hz: 69.75e6, levelDbm: -93.5 },
        { hz: 70e6, levelDbm: -91.4 },
      ],
    }),
    write: (capture) =>
      traceText({
        preamble: [
          '# Start: 69.5 MHz',
          '# Stop: 70.5 MHz',
          `# Points: ${POINTS}`,
          '# RBW: 10 kHz',
          '# VBW: 1 MHz',
          '# Detector: sample',
          '# Average type: power',
          '# Averages: 20',
          '# Sweep time: 25 ms',
          '# Attenuation: 10 dB',
          '# Unit: dBm',
          '# Date: 2026-11-27 14:05',
        ],
        header: [],
        columns: [cells(capture.levelDbm, 2)],
        delimiter: ',',
      }),
  },
  {
    file: 'strip10_avg_max.csv',
    name: 'IF strip 10, output, average and max hold',
    campaign: LOT_3,
    uploader: 'technician',
    settings: BENCH,
    shows: 'Two traces of the same 20 sweeps: the power average, and the highest of each point.',
    form: 'comma, two traces as columns, two header lines, axis in kHz',
    spec: strip({ seed: 1001, densityDbmPerHz: -145.62, spurs: [{ hz: 70.1e6, levelDbm: -90 }] }),
    write: (capture) =>
      traceText({
        preamble: [
          'Centre frequency,70,MHz',
          'Span,1,MHz',
          'RBW,10,kHz',
          'VBW,1,MHz',
          'Detector,Sample',
          'Average type,Power',
          'Average count,20',
          'Sweep time,25,ms',
          'Attenuation,10,dB',
          'Date,2026-11-27 13:20',
          '',
        ],
        header: ['Frequency,Average,Max hold', 'kHz,dBm,dBm'],
        columns: [
          cells(capture.frequencyHz, 0, 1e3),
          cells(capture.levelDbm, 2),
          cells(capture.maxHoldDbm, 2),
        ],
        delimiter: ',',
      }),
  },
  {
    file: 'strip16_out.csv',
    name: 'IF strip 16, output',
    campaign: LOT_3,
    uploader: 'technician',
    shows: 'No trace at all: a page of the bench’s web server, saved under a trace’s name.',
    form: 'HTML',
    spec: null,
    text: [
      '<!DOCTYPE html>',
      '<html lang="en">',
      '<head><title>Bench files</title></head>',
      '<body>',
      '<h1>Signed out</h1>',
      '<p>Sign in again to download strip16_out.csv.</p>',
      '</body>',
      '</html>',
      '',
    ].join('\n'),
  },
];
