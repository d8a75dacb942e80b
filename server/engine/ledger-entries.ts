import { fixed, frequencyWords, plural, significant } from '../../shared/quantities.ts';
import type { SettingName } from '../../shared/settings.ts';
import { originWords, type EffectiveSettings } from './effective-settings.ts';
import type { LedgerEntry } from './ledger.ts';
import type { Stage } from './point-law.ts';

type Input = LedgerEntry['inputs'][number];

const settingInput = (
  { settings }: EffectiveSettings,
  setting: SettingName,
  name: string,
  value: string,
): Input => ({
  name,
  value,
  origin: originWords(settings, setting),
});

/** The reading: the mean of the kept points. */
export function meanEntry(mean: {
  levelDbm: number;
  usedPoints: number;
  spursLeftOut: number;
  effectivePoints: number;
  unit: 'dBm' | 'dBm/Hz';
}): LedgerEntry {
  const out = mean.spursLeftOut > 0 ? `; ${plural(mean.spursLeftOut, 'spur')} left out` : '';
  return {
    id: 'mean',
    label: `Mean of ${plural(mean.usedPoints, 'point')}`,
    caption: `in linear power${out}`,
    valueDb: mean.levelDbm,
    kind: 'reading',
    budgetIds: ['statistics', 'rounding'],
    formula: `10 lg[(1/M) Σ 10^(Lᵢ/10)] = ${fixed(mean.levelDbm, 2)} ${mean.unit}`,
    inputs: [
      { name: 'M', value: String(mean.usedPoints), origin: 'points not left out' },
      {
        name: 'independent',
        value: significant(mean.effectivePoints, 3),
        origin: 'autocorrelation of the points',
      },
    ],
    source: 'Method: mean in linear power; JCGM 100:2008, 4.2',
  };
}

const SCALE_WORDS = {
  power: 'power',
  log: 'log',
  voltage: 'voltage',
  largest: 'largest',
  smallest: 'smallest',
};

/** What a chain of stages averages, in words: `20 sweeps on the log scale`. */
export function stagesWords(stages: Stage[], sweeps: number | null): string {
  if (stages.length === 0) return 'single values, nothing averaged';
  return stages
    .map(({ place, scale, values }) => {
      if (scale === 'largest' || scale === 'smallest') return `${scale} of ${significant(values, 3)} values`;
      const what =
        place === 'sweeps' && sweeps !== null && Math.abs(values - sweeps) < 1e-9
          ? plural(sweeps, 'sweep')
          : plural(Number(significant(values, 3)), 'value');
      return `${what} on the ${SCALE_WORDS[scale]} scale`;
    })
    .join(', then ');
}

function biasFormula(stages: Stage[], correctionDb: number): string {
  const result = `${fixed(correctionDb, 2, 'always')} dB`;
  const scales = stages.map(({ scale }) => scale).join(' ');
  switch (scales) {
    case '':
      return 'single values: 0';
    case 'power':
      return 'power averaging: 0';
    case 'log':
      return `−10 N lg Γ(1 + 1/N) = ${result}`;
    case 'voltage':
      return `−10 lg[π/4 + (1 − π/4)/N] = ${result}`;
    case 'power log':
      return `−10 lg{[Γ(k + 1/N)/Γ(k)]^N / k} = ${result}`;
    case 'largest':
      return `−10 lg H(n), H(n) = Σ 1/i = ${result}`;
    default:
      return `−10 lg E[P], exact moments of the chain = ${result}`;
  }
}

/** What the skirts of the spurs that are left out still add to the mean, taken off. */
export function skirtEntry(effective: EffectiveSettings, skirtCorrectionDb: number): LedgerEntry {
  const share = 1 - 10 ** (skirtCorrectionDb / 10);
  return {
    id: 'skirts',
    label: 'Skirts of the spurs',
    caption: `${significant(100 * share, 2)} % of the mean, taken off`,
    valueDb: skirtCorrectionDb,
    kind: 'correction',
    budgetIds: ['skirts'],
    formula: `10 lg(1 − s) = ${fixed(skirtCorrectionDb, 2, 'always')} dB`,
    inputs: [
      { name: 's', value: significant(share, 3), origin: 'the filter’s response at the kept points' },
      settingInput(effective, 'filterShape', 'shape', effective.values.filterShape ?? 'gaussian'),
    ],
    source: 'Method: spurs, guarded by the filter’s shape',
  };
}

/** The correction for what averaging does to the linear mean. */
export function biasEntry(
  effective: EffectiveSettings,
  bias: { correctionDb: number; stages: Stage[]; sweeps: number | null; check: string },
): LedgerEntry {
  const symbols = bias.stages.map(({ place, scale, values }): Input => {
    const symbol = place === 'sweeps' ? 'N' : scale === 'largest' || scale === 'smallest' ? 'n' : 'k';
    const setting = place === 'sweeps' ? 'sweeps' : place === 'video' ? 'vbwHz' : 'sweepTimeS';
    return settingInput(effective, setting, symbol, significant(values, 4));
  });
  const scale = effective.values.averagingScale;
  return {
    id: 'bias',
    label: 'Averaging bias',
    caption: stagesWords(bias.stages, bias.sweeps),
    valueDb: bias.correctionDb,
    kind: 'correction',
    budgetIds: ['averaging'],
    formula: biasFormula(bias.stages, bias.correctionDb),
    inputs: [
      ...symbols,
      ...(scale === undefined ? [] : [settingInput(effective, 'averagingScale', 'scale', scale)]),
      ...(effective.values.detector === undefined
        ? []
        : [settingInput(effective, 'detector', 'detector', effective.values.detector)]),
    ],
    check: bias.check,
    source: 'Method: averaging bias, exact for finite N; limits −2.51 dB (log) and −1.05 dB (voltage)',
  };
}

/** The line that stays open while the averaging scale isn't stated. */
export function openBiasEntry(): LedgerEntry {
  return {
    id: 'bias',
    label: 'Averaging bias',
    caption: 'open until the averaging scale is stated',
    valueDb: 0,
    kind: 'correction',
    budgetIds: ['averaging'],
    formula: 'depends on the scale on which the values were averaged',
    inputs: [],
    source: 'Method: averaging bias, exact for finite N',
  };
}

/** The step from the filter's noise bandwidth to 1 Hz. */
export function bandwidthEntry(
  effective: EffectiveSettings,
  bandwidth: { noiseBandwidthHz: number; ratio: number; rbwHz: number },
): LedgerEntry {
  const { values } = effective;
  const measured = values.bandwidthRatio !== undefined;
  return {
    id: 'bandwidth',
    label: 'Noise bandwidth',
    caption: `${fixed(bandwidth.ratio, 4)} × ${frequencyWords(bandwidth.rbwHz)}, to 1 Hz`,
    valueDb: -10 * Math.log10(bandwidth.noiseBandwidthHz),
    kind: 'correction',
    budgetIds: ['bandwidth', 'rbw'],
    formula: `−10 lg(r · RBW / 1 Hz) = ${fixed(-10 * Math.log10(bandwidth.noiseBandwidthHz), 2, 'always')} dB`,
    inputs: [
      settingInput(effective, 'rbwHz', 'RBW', frequencyWords(bandwidth.rbwHz)),
      measured
        ? settingInput(effective, 'bandwidthRatio', 'r', fixed(bandwidth.ratio, 4))
        : settingInput(effective, 'filterShape', 'r', fixed(bandwidth.ratio, 4)),
      ...(measured || values.rbwKind === undefined
        ? []
        : [settingInput(effective, 'rbwKind', 'kind', values.rbwKind)]),
    ],
    source: measured ? 'measured ratio' : 'Method: noise bandwidth by filter shape',
  };
}

/** The subtraction of the analyser's own noise in linear power. */
export function ownNoiseEntry(
  effective: EffectiveSettings,
  ownNoise: { correctionDb: number; marginDb: number },
): LedgerEntry {
  const density = effective.values.ownNoiseDbmPerHz ?? 0;
  return {
    id: 'ownNoise',
    label: 'Analyser’s own noise',
    caption: `${fixed(density, 1)} dBm/Hz, subtracted`,
    valueDb: ownNoise.correctionDb,
    kind: 'correction',
    budgetIds: ['ownNoise'],
    formula: `10 lg(1 − 10^(−margin/10)) = ${fixed(ownNoise.correctionDb, 2, 'always')} dB`,
    inputs: [
      { name: 'margin', value: `${fixed(ownNoise.marginDb, 2)} dB`, origin: 'reading over own noise' },
      settingInput(effective, 'ownNoiseDbmPerHz', 'own noise', `${fixed(density, 2)} dBm/Hz`),
    ],
    source: 'Method: own noise, subtracted in linear power',
  };
}

/** The analyser's level scale: no correction, but its uncertainty. */
export function levelEntry(effective: EffectiveSettings): LedgerEntry {
  const u = effective.values.levelUncertaintyDb;
  return {
    id: 'level',
    label: 'Level scale',
    caption: u === undefined ? 'uncertainty not stated' : 'as calibrated',
    valueDb: 0,
    kind: 'correction',
    budgetIds: ['level'],
    formula: 'no correction stated',
    inputs: [
      settingInput(
        effective,
        'levelUncertaintyDb',
        'u',
        u === undefined ? 'not stated' : `${fixed(u, 2)} dB`,
      ),
    ],
    source: 'JCGM 100:2008, 4.3',
  };
}

/** The gain between device and analyser, taken out. */
export function gainEntry(effective: EffectiveSettings, externalGainDb: number): LedgerEntry {
  return {
    id: 'gain',
    label: 'External gain',
    caption: `${fixed(externalGainDb, 2, 'always')} dB between device and analyser, taken out`,
    valueDb: externalGainDb === 0 ? 0 : -externalGainDb,
    kind: 'correction',
    budgetIds: ['gain'],
    formula: `−G = ${fixed(-externalGainDb, 2, 'always')} dB`,
    inputs: [settingInput(effective, 'externalGainDb', 'G', `${fixed(externalGainDb, 2, 'always')} dB`)],
    source: 'Method: external gain',
  };
}
