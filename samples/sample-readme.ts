import type { CaptureSpec, Truth } from '../tests/support/simulator/spec.ts';
import type { Sample } from './sample.ts';

const minus = (text: string) => text.replaceAll('-', '−');
const db = (value: number, decimals = 2) => minus(value.toFixed(decimals));

const frequency = (hz: number) => {
  const [unit, name] = hz >= 1e6 ? [1e6, 'MHz'] : hz >= 1e3 ? [1e3, 'kHz'] : [1, 'Hz'];
  return `${Number((hz / unit).toPrecision(6))} ${name}`;
};

function chainWords(spec: CaptureSpec): string {
  const filter =
    spec.filter.shape === 'poles'
      ? `${spec.filter.poles} poles`
      : spec.filter.shape === 'gaussian'
        ? 'Gaussian'
        : 'rectangular';
  const video = spec.vbwHz ? `, video filter ${frequency(spec.vbwHz)}` : '';
  const dwell = spec.mode.kind === 'swept' ? `, dwell ${spec.mode.dwellInRbw.toFixed(3)}/RBW` : '';
  return `${filter}, −3 dB width ${frequency(spec.rbwHz)}; ${spec.detector} detector${dwell}${video}; ${spec.sweeps} × ${spec.averagingScale}; steps of ${spec.roundingDb} dB`;
}

function signalWords(spec: CaptureSpec): string {
  const spurs = spec.spurs ?? [];
  const listed = spurs.map(({ hz, levelDbm }) => `${frequency(hz)} ${db(levelDbm, 1)} dBm`);
  if (spurs.length <= 3) return listed.join('; ') || 'none';
  return `${spurs.length}, from ${listed[0]} to ${listed[spurs.length - 1]}`;
}

/** The README of this folder: what each file shows, its form, and what is true of it. */
export function sampleReadme(samples: Sample[], truths: Map<string, Truth>): string {
  const shown = samples.map(({ file, shows, form }) => `| \`${file}\` | ${shows} | ${form} |`);
  const true_ = samples.flatMap(({ file }) => {
    const truth = truths.get(file);
    if (!truth) return [];
    const { spec } = truth;
    const cells = [
      `\`${file}\``,
      db(truth.densityDbmPerHz),
      db(truth.displayedDensityDbmPerHz),
      signalWords(spec),
      chainWords(spec),
      String(spec.seed),
    ];
    return [`| ${cells.join(' | ')} |`];
  });
  return `# Samples

Captures of an invented bench, Harbour Bench, made by the simulator in \`tests/support/simulator\` with fixed seeds. No
instrument made them. The demo uploads them as \`samples.json\` says; \`truth.json\` holds everything below with
all digits. Made by

    npx tsx samples/generate.ts

which writes the same bytes every time (a test compares them). To change a file, change its entry in \`*-samples.ts\`.

| file | shows | form |
| --- | --- | --- |
${shown.join('\n')}

## What is true

Densities are means over the points in linear power, dBm/Hz. *Device*: at the device's output, before the cable and
without the analyser's own noise. *Analyser*: all that arrives there, which is what the trace shows. A strip's cable has a
gain of −0.35 dB and the analyser adds −156.50 dBm/Hz; where no cable is given the two are the same. Signals are CW, with their level at the
analyser. A width of 9 kHz at −6 dB is 6.364 kHz at −3 dB. The dwell is the time spent on a point.

| file | device | analyser | signals | filter and chain | seed |
| --- | --- | --- | --- | --- | --- |
${true_.join('\n')}
`;
}
