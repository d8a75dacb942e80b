import type { AveragingCheck, Density, Finding, Floor, Spur } from '../../shared/estimate.ts';
import { countWords, fixed, frequencyWords, plural, significant } from '../../shared/quantities.ts';
import type { SettingName } from '../../shared/settings.ts';
import type { Budget } from './budget.ts';
import type { EffectiveSettings } from './effective-settings.ts';
import { noiseBandwidthRatio } from './noise-bandwidth.ts';

/** Everything that a finding may speak of. */
export interface FindingContext {
  effective: EffectiveSettings;
  unit: 'dBm' | 'dBm/Hz';
  usedPoints: number;
  spacingHz: number;
  spanHz: number;
  uniform: boolean;
  check: AveragingCheck;
  missing: SettingName[];
  density: Density | null;
  budget: Budget;
  spurs: Spur[];
  /** Power of the spurs over all power in the trace, 0 to 1. */
  spurPowerShare: number;
  /** Share of the mean that the skirts of spurs still carry, 0 to 1. */
  skirtShare: number;
  floor: Floor;
  quantizationStepDb: number | null;
  /** Points that share the lowest level, 0 to 1. */
  bottomShare: number;
  /** How far the reading stands above the analyser's own noise; null: own noise not stated. */
  ownNoiseMarginDb: number | null;
}

type Rule = (context: FindingContext) => Finding | null;

const finding = (
  code: string,
  severity: Finding['severity'],
  message: string,
  evidence: string,
  advice: string,
): Finding => ({
  code,
  severity,
  message,
  evidence,
  advice,
});

const SCALES = { power: 'power', log: 'log', voltage: 'voltage' } as const;

const rules: Rule[] = [
  ({ usedPoints }) =>
    usedPoints > 0
      ? null
      : finding(
          'no-points',
          'stop',
          'No points are left to average.',
          'Every point of the trace is left out.',
          'Put some of the spans back.',
        ),

  ({ missing }) =>
    missing.includes('rbwHz')
      ? finding(
          'rbw-not-stated',
          'stop',
          'The file doesn’t say the RBW.',
          'Without it the level can’t be referred to 1 Hz.',
          'Enter the RBW that the trace was taken with.',
        )
      : null,

  ({ missing, check }) =>
    missing.includes('averagingScale')
      ? finding(
          'scale-not-stated',
          'stop',
          'The averaging scale isn’t stated.',
          check.sentence,
          'Say on which scale the sweeps were averaged; the density under each scale that fits is shown.',
        )
      : null,

  ({ effective, check }) => {
    const scale = effective.settings.averagingScale;
    if (scale?.origin.kind !== 'assumed' || (effective.values.sweeps ?? 1) <= 1) return null;
    return finding(
      'scale-from-scatter',
      'caution',
      `The averaging scale is taken from the scatter: ${SCALES[scale.value]}.`,
      check.sentence,
      'Confirm the scale from the analyser’s set-up.',
    );
  },

  ({ effective }) =>
    effective.settings.sweeps?.origin.kind === 'assumed'
      ? finding(
          'sweeps-not-stated',
          'caution',
          'The number of averaged sweeps isn’t stated.',
          `Taken as ${significant(effective.settings.sweeps.value, 3)}: ${effective.settings.sweeps.origin.reason}.`,
          'Enter the number of sweeps that were averaged.',
        )
      : null,

  ({ check, density }) => {
    if (check.verdict !== 'other') return null;
    const fits = check.likelihoods.find(({ id }) => id === check.fits);
    const error = fits?.levelErrorDb ?? 0;
    const severity =
      Math.abs(error) > Math.max(0.1, 0.5 * (density?.expandedUncertaintyDb ?? 0)) ? 'stop' : 'caution';
    return finding(
      'averaging-differs',
      severity,
      'The averaging isn’t what is declared.',
      check.sentence,
      check.advice,
    );
  },

  ({ check }) =>
    check.verdict === 'none'
      ? finding(
          'averaging-fits-none',
          'stop',
          'The scatter fits no known averaging.',
          check.sentence,
          check.advice,
        )
      : null,

  ({ check, missing }) =>
    check.verdict === 'undetermined' && check.fits !== null && !missing.includes('averagingScale')
      ? finding(
          'averaging-undetermined',
          'note',
          'The averaging can’t be told from this trace.',
          check.sentence,
          check.advice,
        )
      : null,

  ({ effective: { values } }) => {
    const names = {
      peak: 'positive peak',
      negativePeak: 'negative peak',
      autoPeak: 'alternating peak',
      quasiPeak: 'quasi-peak',
    };
    const { detector } = values;
    if (detector === undefined || detector === 'sample' || detector === 'average') return null;
    return finding(
      'peak-detector',
      'stop',
      `The ${names[detector]} detector doesn’t show the noise level.`,
      'It keeps an extreme of the values within each point; the correction rests on how many there were. The density is indicative only.',
      'Repeat the capture with the sample or the average (RMS) detector.',
    );
  },

  ({ effective: { values } }) => {
    const { vbwHz, rbwHz, averagingScale, detector } = values;
    if (vbwHz === undefined || rbwHz === undefined || averagingScale !== 'power' || detector !== 'sample')
      return null;
    if (vbwHz >= 3 * rbwHz) return null;
    return finding(
      'vbw-below-rbw',
      'caution',
      'The video filter averages before the sweeps do.',
      `VBW is ${significant(vbwHz / rbwHz, 2)} of the RBW. On a display in dB that filter works on the log scale, whatever the sweeps do.`,
      'Set the VBW to at least three times the RBW and repeat.',
    );
  },

  ({ effective: { values }, spanHz }) => {
    const { rbwHz, sweepTimeS } = values;
    if (rbwHz === undefined || sweepTimeS === undefined || spanHz <= 0) return null;
    const neededS = (2.5 * spanHz) / rbwHz ** 2;
    if (sweepTimeS >= neededS || values.filterShape?.startsWith('fft')) return null;
    return finding(
      'sweep-too-fast',
      'caution',
      'The sweep is faster than the filter settles.',
      `${significant(sweepTimeS * 1e3, 3)} ms for the span; 2.5·span/RBW² is ${significant(neededS * 1e3, 3)} ms (common practice). Signals read low and wide; noise keeps its level.`,
      'Lengthen the sweep time, or let the analyser couple it.',
    );
  },

  ({ effective: { values }, spacingHz, unit }) =>
    unit === 'dBm' && values.rbwHz !== undefined && spacingHz > values.rbwHz
      ? finding(
          'spacing-above-rbw',
          'note',
          'The points stand further apart than the RBW.',
          `${frequencyWords(spacingHz)} between points, RBW ${frequencyWords(values.rbwHz)}. Signals between points can be missed; the noise level isn’t affected.`,
          'Use more points or a smaller span to see narrow signals.',
        )
      : null,

  ({ effective, unit }) => {
    if (!effective.assumed.has('rbwKind')) return null;
    const { rbwHz, filterShape } = effective.values;
    if (unit !== 'dBm' || rbwHz === undefined) return null;
    const shape = filterShape ?? 'gaussian';
    const changeDb = -10 * Math.log10(noiseBandwidthRatio(shape, '6dB') / noiseBandwidthRatio(shape, '3dB'));
    return finding(
      'rbw-kind-not-stated',
      'caution',
      'The file doesn’t say what kind of RBW it means.',
      `Taken as −3 dB; as −6 dB the density would be ${fixed(changeDb, 2)} dB higher.`,
      'Confirm −3 dB, or choose another kind.',
    );
  },

  ({ effective, budget }) => {
    if (!effective.assumed.has('filterShape')) return null;
    const share = budget.lines.find(({ id }) => id === 'bandwidth')?.share ?? 0;
    return finding(
      'filter-shape-assumed',
      'caution',
      'The filter’s shape is assumed, not measured.',
      `Taken as Gaussian; it carries ${Math.round(100 * share)} % of U².`,
      'State the shape, or enter a measured noise-bandwidth ratio.',
    );
  },

  ({ effective }) =>
    effective.assumed.has('detector')
      ? finding(
          'detector-not-stated',
          'note',
          'The detector isn’t stated.',
          'Taken as sample; the averaging check would show a detector that averages.',
          'Enter the detector that was used.',
        )
      : null,

  ({ effective: { values } }) =>
    values.levelUncertaintyDb === undefined
      ? finding(
          'level-uncertainty-not-stated',
          'note',
          'The analyser’s level uncertainty isn’t stated.',
          'U holds the statistics and what else is known; log fidelity and mismatch aren’t in it either.',
          'Enter the standard uncertainty from the instrument’s calibration.',
        )
      : null,

  ({ effective: { values } }) =>
    values.externalGainDb !== undefined && values.externalGainUncertaintyDb === undefined
      ? finding(
          'gain-uncertainty-not-stated',
          'note',
          'The uncertainty of the external gain isn’t stated.',
          `The gain of ${fixed(values.externalGainDb, 2, 'always')} dB is taken out as if it were exact.`,
          'Enter its standard uncertainty.',
        )
      : null,

  ({ ownNoiseMarginDb }) => {
    if (ownNoiseMarginDb === null || ownNoiseMarginDb >= 10) return null;
    const margin = `The reading stands ${fixed(ownNoiseMarginDb, 1)} dB above the analyser’s own noise.`;
    return ownNoiseMarginDb < 3
      ? finding(
          'own-noise-too-near',
          'stop',
          'The analyser’s own noise hides the device.',
          `${margin} Below 3 dB a subtraction isn’t trustworthy.`,
          'Lower the attenuation or use a preamplifier, within the input’s ratings, and repeat both captures.',
        )
      : finding(
          'own-noise-near',
          'caution',
          'The analyser’s own noise is near.',
          `${margin} It is subtracted in linear power, and its uncertainty grows with it.`,
          'A preamplifier or less attenuation, within the input’s ratings, gives more margin.',
        );
  },

  ({ ownNoiseMarginDb, effective: { values } }) =>
    ownNoiseMarginDb === null && (values.attenuationDb ?? 0) > 0
      ? finding(
          'own-noise-not-stated',
          'note',
          'The analyser’s own noise isn’t subtracted.',
          `${fixed(values.attenuationDb ?? 0, 0)} dB of attenuation raise it by as much.`,
          'Take a capture with the input terminated and enter its density as own noise.',
        )
      : null,

  ({ effective: { values } }) =>
    values.attenuationDb === 0 || values.preamplifier === true
      ? finding(
          'input-unprotected',
          'note',
          values.attenuationDb === 0 ? 'The input has no attenuation.' : 'The preamplifier is on.',
          'Total power and DC at the input must stay below the analyser’s ratings, transients included.',
          'Follow the instrument’s own limits and local rules; a DC block or a limiter protects the input.',
        )
      : null,

  ({ density }) =>
    density !== null && density.aboveThermalDb < -Math.max(density.expandedUncertaintyDb, 0.3)
      ? finding(
          'below-thermal',
          'stop',
          'The density is below thermal noise at 290 K.',
          `It stands ${fixed(-density.aboveThermalDb, 1)} dB below k·T0 = −173.98 dBm/Hz.`,
          'Look for a trace that was already per hertz, a gain counted twice, or a wrong RBW.',
        )
      : null,

  ({ skirtShare }) =>
    skirtShare < 0.02
      ? null
      : finding(
          'skirts-reach-floor',
          skirtShare > 0.2 ? 'stop' : 'caution',
          'The skirts of strong spurs reach over the floor.',
          `They carry ${significant(100 * skirtShare, 2)} % of the mean that is left; the filter falls slowly, so no span is free of them.`,
          'Use a narrower RBW or a steeper filter, or capture beside the spurs.',
        ),

  ({ spurs, spurPowerShare }) => {
    const out = spurs.filter(({ leftOut }) => leftOut).length;
    return spurPowerShare > 0.1 && out > 0
      ? finding(
          'spurs-carry-power',
          'note',
          `${plural(out, 'spur')} ${out === 1 ? 'carries' : 'carry'} much of the power.`,
          `${Math.round(100 * spurPowerShare)} % of the power in the trace; left out of the mean.`,
          'Find their source if they aren’t meant to be there.',
        )
      : null;
  },

  ({ spurs }) => {
    const family = spurs.find((spur) => spur.family)?.family;
    return family
      ? finding(
          'spur-family',
          'note',
          `${plural(family.members, 'spur')} stand ${frequencyWords(family.spacingHz)} apart.`,
          'Equal spacing points to one source.',
          `Look for something that works at ${frequencyWords(family.spacingHz)}.`,
        )
      : null;
  },

  ({ floor }) => {
    const tilt = `${fixed(floor.tiltDb, 2, 'always')} ± ${fixed(floor.tiltUncertaintyDb, 2)} dB`;
    return floor.model === 'level'
      ? finding(
          'floor-level',
          'note',
          'The floor is level.',
          `Tilt across the span ${tilt}.`,
          'Nothing to do.',
        )
      : finding(
          'floor-not-flat',
          'caution',
          floor.model === 'tilt' ? 'The floor is tilted.' : 'The floor isn’t flat.',
          `Tilt across the span ${tilt}. The density is the band’s average in linear power.`,
          'Use a narrower band if the density at one frequency is asked for.',
        );
  },

  ({ floor }) =>
    floor.ripple
      ? finding(
          'ripple',
          'caution',
          'The floor ripples.',
          `Period ${frequencyWords(floor.ripple.periodHz)}, depth ${fixed(floor.ripple.depthDb, 2)} dB.`,
          'A standing wave on a cable does this; add a pad or shorten the cable.',
        )
      : null,

  ({ quantizationStepDb }) =>
    quantizationStepDb !== null && quantizationStepDb >= 0.1
      ? finding(
          'coarse-steps',
          quantizationStepDb >= 0.5 ? 'caution' : 'note',
          'The levels are written in coarse steps.',
          `Steps of ${significant(quantizationStepDb)} dB; they add ${fixed(quantizationStepDb / Math.sqrt(12), 3)} dB to the scatter of a point.`,
          'Export with more decimals.',
        )
      : null,

  ({ bottomShare }) =>
    bottomShare > 0.02
      ? finding(
          'bottom-line',
          'caution',
          'Many points stand at the lowest level.',
          `${significant(100 * bottomShare, 2)} % of the points share one lowest value: the display’s bottom line cuts the noise.`,
          'Lower the reference level so that the whole noise shows, and repeat.',
        )
      : null,

  ({ unit }) =>
    unit === 'dBm/Hz'
      ? finding(
          'already-per-hertz',
          'note',
          'The trace is already per hertz.',
          'Its unit is dBm/Hz, so it isn’t normalised again.',
          'Check which noise bandwidth the analyser used.',
        )
      : null,

  ({ uniform }) =>
    uniform
      ? null
      : finding(
          'axis-not-uniform',
          'note',
          'The frequency axis isn’t evenly spaced.',
          'Each point counts the same; dense parts weigh more.',
          'Use an evenly spaced sweep where the band average matters.',
        ),

  ({ usedPoints }) =>
    usedPoints > 0 && usedPoints < 20
      ? finding(
          'few-points',
          'caution',
          `Only ${countWords(usedPoints)} points carry the mean.`,
          'The interval rests on the stated averaging, since so few points can’t show their own scatter.',
          'Use more points or a wider span.',
        )
      : null,
];

const SEVERITY_ORDER = { stop: 0, caution: 1, note: 2 } as const;

/** All findings on an estimate, the most severe first. */
export function findings(context: FindingContext): Finding[] {
  return rules
    .flatMap((rule) => rule(context) ?? [])
    .sort((a, b) => SEVERITY_ORDER[a.severity] - SEVERITY_ORDER[b.severity]);
}
