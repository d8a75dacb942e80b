import { z } from 'zod';

/** What a stated resolution bandwidth means. `noise`: it already is the noise bandwidth. */
export const RbwKind = z.enum(['3dB', '6dB', 'noise']);
export type RbwKind = z.infer<typeof RbwKind>;

/** Filter shapes whose noise bandwidth is known. `polesN`: N synchronously tuned poles. `fft…`: window of an FFT analyser. */
export const FilterShape = z.enum([
  'gaussian',
  'rectangular',
  'poles1',
  'poles2',
  'poles3',
  'poles4',
  'poles5',
  'fftRectangular',
  'fftHann',
  'fftHamming',
  'fftBlackman',
  'fftBlackmanHarris',
  'fftFlatTop',
]);
export type FilterShape = z.infer<typeof FilterShape>;

/**
 * `average`: mean over the point's dwell time (on the power scale unless `detectorScale` says otherwise; also called RMS).
 * `autoPeak`: positive and negative peaks alternate.
 */
export const Detector = z.enum(['sample', 'average', 'peak', 'negativePeak', 'autoPeak', 'quasiPeak']);
export type Detector = z.infer<typeof Detector>;

/** Scale on which values were averaged. */
export const Scale = z.enum(['power', 'log', 'voltage']);
export type Scale = z.infer<typeof Scale>;

/** Where the value of a setting came from. */
export const Origin = z.discriminatedUnion('kind', [
  z.object({ kind: z.literal('file'), line: z.number().int().positive(), text: z.string().optional() }),
  z.object({ kind: z.literal('instrument'), name: z.string() }),
  z.object({ kind: z.literal('person'), name: z.string(), at: z.iso.datetime() }),
  z.object({ kind: z.literal('command') }),
  z.object({ kind: z.literal('assumed'), reason: z.string() }),
]);
export type Origin = z.infer<typeof Origin>;

const positive = z.number().positive().max(1e15);
const decibel = z.number().min(-400).max(400);

/** Every setting of a capture by name, with its unit in the name. An absent key means: not stated. */
export const SettingValues = z
  .object({
    rbwHz: positive,
    rbwKind: RbwKind,
    filterShape: FilterShape,
    /** Measured noise bandwidth over RBW; wins over `filterShape` and `rbwKind` for the noise bandwidth. */
    bandwidthRatio: z.number().min(0.1).max(10),
    /** Standard uncertainty of `bandwidthRatio`, as a ratio. */
    bandwidthRatioUncertainty: z.number().min(0).max(1),
    vbwHz: positive,
    detector: Detector,
    /** Scale on which an average detector works over the dwell time of a point. */
    detectorScale: Scale,
    /** Scale of the averaging over sweeps and of the video filter. */
    averagingScale: Scale,
    sweeps: z.number().min(1).max(1e6),
    sweepTimeS: positive,
    attenuationDb: decibel,
    preamplifier: z.boolean(),
    referenceLevelDbm: decibel,
    /** Gain between the device and the analyser's input (a loss is negative); subtracted to refer the density to the device. */
    externalGainDb: decibel,
    /** Standard uncertainty of `externalGainDb`. */
    externalGainUncertaintyDb: z.number().min(0).max(100),
    /** Standard uncertainty of the analyser's absolute level. */
    levelUncertaintyDb: z.number().min(0).max(100),
    /** The analyser's own noise density, to be subtracted in linear power. */
    ownNoiseDbmPerHz: z.number().min(-300).max(100),
    /** Standard uncertainty of `ownNoiseDbmPerHz`. */
    ownNoiseUncertaintyDb: z.number().min(0).max(100),
    impedanceOhm: z.number().positive().max(1e6),
    sourceTemperatureK: z.number().min(0).max(1e6),
    startHz: z.number(),
    stopHz: z.number(),
    centreHz: z.number(),
    spanHz: z.number().min(0),
    /** Number of points that the file states, to be held against those it has. */
    statedPoints: z.number().int().positive(),
    /** When the trace was taken, as written in the file. */
    takenAt: z.string().max(200),
    instrument: z.string().max(200),
  })
  .partial();
export type SettingValues = z.infer<typeof SettingValues>;
export type SettingName = keyof SettingValues;

/** Settings with where each came from. */
export type Settings = {
  [Name in SettingName]?: { value: NonNullable<SettingValues[Name]>; origin: Origin };
};

const shape = SettingValues.shape;
const originated = <T extends z.ZodType>(value: T) => z.object({ value, origin: Origin }).optional();

/** Schema of `Settings`: each setting as `{value, origin}`. */
export const Settings = z.object({
  rbwHz: originated(shape.rbwHz.unwrap()),
  rbwKind: originated(shape.rbwKind.unwrap()),
  filterShape: originated(shape.filterShape.unwrap()),
  bandwidthRatio: originated(shape.bandwidthRatio.unwrap()),
  bandwidthRatioUncertainty: originated(shape.bandwidthRatioUncertainty.unwrap()),
  vbwHz: originated(shape.vbwHz.unwrap()),
  detector: originated(shape.detector.unwrap()),
  detectorScale: originated(shape.detectorScale.unwrap()),
  averagingScale: originated(shape.averagingScale.unwrap()),
  sweeps: originated(shape.sweeps.unwrap()),
  sweepTimeS: originated(shape.sweepTimeS.unwrap()),
  attenuationDb: originated(shape.attenuationDb.unwrap()),
  preamplifier: originated(shape.preamplifier.unwrap()),
  referenceLevelDbm: originated(shape.referenceLevelDbm.unwrap()),
  externalGainDb: originated(shape.externalGainDb.unwrap()),
  externalGainUncertaintyDb: originated(shape.externalGainUncertaintyDb.unwrap()),
  levelUncertaintyDb: originated(shape.levelUncertaintyDb.unwrap()),
  ownNoiseDbmPerHz: originated(shape.ownNoiseDbmPerHz.unwrap()),
  ownNoiseUncertaintyDb: originated(shape.ownNoiseUncertaintyDb.unwrap()),
  impedanceOhm: originated(shape.impedanceOhm.unwrap()),
  sourceTemperatureK: originated(shape.sourceTemperatureK.unwrap()),
  startHz: originated(shape.startHz.unwrap()),
  stopHz: originated(shape.stopHz.unwrap()),
  centreHz: originated(shape.centreHz.unwrap()),
  spanHz: originated(shape.spanHz.unwrap()),
  statedPoints: originated(shape.statedPoints.unwrap()),
  takenAt: originated(shape.takenAt.unwrap()),
  instrument: originated(shape.instrument.unwrap()),
});

/** Setting changes that a person sends: a value sets it, null takes it back to what the file says. */
export const SettingChanges = z.strictObject(
  Object.fromEntries(
    Object.entries(shape).map(([name, schema]) => [name, schema.unwrap().nullable().optional()]),
  ),
);
