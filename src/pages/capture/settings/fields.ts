import { z } from 'zod';
import { SettingValues, type SettingName } from '../../../../shared/settings.ts';
import { parseQuantity, type Quantity, QUANTITIES } from './quantity-text.ts';

/** Settings that are typed, with their quantity and the range in words. */
const TYPED = {
  rbwHz: { quantity: QUANTITIES.frequency, range: 'above 0 Hz' },
  vbwHz: { quantity: QUANTITIES.frequency, range: 'above 0 Hz' },
  sweeps: { quantity: QUANTITIES.count, range: 'from 1 to 1,000,000' },
  sweepTimeS: { quantity: QUANTITIES.time, range: 'above 0 ms' },
  attenuationDb: { quantity: QUANTITIES.decibel, range: 'between −400 and 400 dB' },
  externalGainDb: { quantity: QUANTITIES.decibel, range: 'between −400 and 400 dB' },
  externalGainUncertaintyDb: { quantity: QUANTITIES.decibel, range: 'from 0 to 100 dB' },
  levelUncertaintyDb: { quantity: QUANTITIES.decibel, range: 'from 0 to 100 dB' },
  ownNoiseDbmPerHz: { quantity: QUANTITIES.density, range: 'between −300 and 100 dBm/Hz' },
  ownNoiseUncertaintyDb: { quantity: QUANTITIES.decibel, range: 'from 0 to 100 dB' },
  bandwidthRatio: { quantity: QUANTITIES.ratio, range: 'between 0.1 and 10' },
  bandwidthRatioUncertainty: { quantity: QUANTITIES.ratio, range: 'from 0 to 1' },
  impedanceOhm: { quantity: QUANTITIES.ohm, range: 'above 0 Ω' },
  sourceTemperatureK: { quantity: QUANTITIES.kelvin, range: 'from 0 K' },
} as const satisfies Partial<Record<SettingName, { quantity: Quantity; range: string }>>;

export type TypedName = keyof typeof TYPED;

export const quantityOf = (name: TypedName): Quantity => TYPED[name].quantity;

const NAMES = z.enum([
  'rbwHz',
  'vbwHz',
  'sweeps',
  'sweepTimeS',
  'attenuationDb',
  'externalGainDb',
  'externalGainUncertaintyDb',
  'levelUncertaintyDb',
  'ownNoiseDbmPerHz',
  'ownNoiseUncertaintyDb',
  'bandwidthRatio',
  'bandwidthRatioUncertainty',
  'impedanceOhm',
  'sourceTemperatureK',
] as const satisfies readonly TypedName[]);
export const TYPED_NAMES: readonly TypedName[] = NAMES.options;

const field = (name: TypedName) =>
  z.string().superRefine((text, context) => {
    if (text.trim() === '') return;
    const { quantity, range } = TYPED[name];
    const parsed = parseQuantity(text, quantity, quantity.shown(null).factor);
    if (!parsed.ok) {
      context.addIssue({ code: 'custom', message: parsed.message });
      return;
    }
    if (!SettingValues.safeParse({ [name]: parsed.value }).success) {
      context.addIssue({ code: 'custom', message: `This has to be ${range}.` });
    }
  });

/** The form: each typed setting as text; blank means not stated. */
export const SettingsTexts = z.object({
  rbwHz: field('rbwHz'),
  vbwHz: field('vbwHz'),
  sweeps: field('sweeps'),
  sweepTimeS: field('sweepTimeS'),
  attenuationDb: field('attenuationDb'),
  externalGainDb: field('externalGainDb'),
  externalGainUncertaintyDb: field('externalGainUncertaintyDb'),
  levelUncertaintyDb: field('levelUncertaintyDb'),
  ownNoiseDbmPerHz: field('ownNoiseDbmPerHz'),
  ownNoiseUncertaintyDb: field('ownNoiseUncertaintyDb'),
  bandwidthRatio: field('bandwidthRatio'),
  bandwidthRatioUncertainty: field('bandwidthRatioUncertainty'),
  impedanceOhm: field('impedanceOhm'),
  sourceTemperatureK: field('sourceTemperatureK'),
});
export type SettingsTexts = z.infer<typeof SettingsTexts>;

export const FILTER_SHAPES = [
  { value: 'gaussian', label: 'Gaussian', note: '1.0645' },
  { value: 'rectangular', label: 'rectangular', note: '1' },
  { value: 'poles1', label: '1 pole' },
  { value: 'poles2', label: '2 poles' },
  { value: 'poles3', label: '3 poles' },
  { value: 'poles4', label: '4 poles' },
  { value: 'poles5', label: '5 poles' },
  { value: 'fftRectangular', label: 'FFT, rectangular' },
  { value: 'fftHann', label: 'FFT, Hann' },
  { value: 'fftHamming', label: 'FFT, Hamming' },
  { value: 'fftBlackman', label: 'FFT, Blackman' },
  { value: 'fftBlackmanHarris', label: 'FFT, Blackman–Harris' },
  { value: 'fftFlatTop', label: 'FFT, flat top' },
] as const;

export const DETECTORS = [
  { value: 'sample', label: 'sample' },
  { value: 'average', label: 'average (RMS)' },
  { value: 'peak', label: 'positive peak' },
  { value: 'negativePeak', label: 'negative peak' },
  { value: 'autoPeak', label: 'alternating peak' },
  { value: 'quasiPeak', label: 'quasi-peak' },
] as const;

export const RBW_KINDS = [
  { value: '3dB', label: '−3 dB' },
  { value: '6dB', label: '−6 dB' },
  { value: 'noise', label: 'noise' },
] as const;

export const SCALES = [
  { value: 'power', label: 'power' },
  { value: 'log', label: 'log' },
  { value: 'voltage', label: 'voltage' },
] as const;
