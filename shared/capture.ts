import { z } from 'zod';
import { EstimateSummary, Severity } from './estimate.ts';
import { SettingChanges, Settings } from './settings.ts';

export const CaptureState = z.enum(['received', 'reading', 'ready', 'needsSettings', 'unreadable']);
export type CaptureState = z.infer<typeof CaptureState>;

/** Something the reader has to say about a file, with the line it speaks of. */
export const ReaderProblem = z.object({
  code: z.string(),
  severity: Severity,
  message: z.string(),
  advice: z.string(),
  line: z.number().int().positive().optional(),
});
export type ReaderProblem = z.infer<typeof ReaderProblem>;

export const LevelUnit = z.enum(['dBm', 'dBm/Hz']);
export type LevelUnit = z.infer<typeof LevelUnit>;

export const TraceSummary = z.object({
  index: z.number().int(),
  name: z.string(),
  points: z.number().int(),
  firstHz: z.number(),
  lastHz: z.number(),
  spacingHz: z.number(),
  uniform: z.boolean(),
  /** Unit of the stored levels; other units of the file are converted on reading. */
  unit: LevelUnit,
  unitInFile: z.string(),
  minLevel: z.number(),
  maxLevel: z.number(),
  /** Settings that differ between traces of one file, such as the detector. */
  settings: Settings,
});
export type TraceSummary = z.infer<typeof TraceSummary>;

/** Min and max level in equal parts of the span, and where spurs stand on it (0 to 1), for the table. */
export const Sparkline = z.object({
  min: z.array(z.number()),
  max: z.array(z.number()),
  spurs: z.array(z.number()),
});
export type Sparkline = z.infer<typeof Sparkline>;

export const Person = z.object({ id: z.uuid(), name: z.string() });
export type Person = z.infer<typeof Person>;

/** A row of the captures table. */
export const CaptureSummary = z.object({
  id: z.uuid(),
  labId: z.uuid(),
  /** Number for people, such as HB-0412. */
  number: z.string(),
  name: z.string(),
  fileName: z.string(),
  bytes: z.number().int(),
  sha256: z.string(),
  state: CaptureState,
  /** Points read so far and, where the file states it, in all. */
  progress: z.object({ points: z.number().int(), ofPoints: z.number().int().nullable() }).nullable(),
  campaign: z.object({ id: z.uuid(), name: z.string() }).nullable(),
  uploadedAt: z.iso.datetime(),
  uploadedBy: Person,
  points: z.number().int().nullable(),
  centreHz: z.number().nullable(),
  spanHz: z.number().nullable(),
  rbwHz: z.number().nullable(),
  sparkline: Sparkline.nullable(),
  /** The latest kept estimate. */
  estimate: EstimateSummary.nullable(),
  /** First problem that stops, for unreadable captures. */
  problem: ReaderProblem.nullable(),
});
export type CaptureSummary = z.infer<typeof CaptureSummary>;

/** What the reader made of the file's structure, in words and by line. */
export const Understanding = z.object({
  encoding: z.string(),
  delimiter: z.string(),
  decimalMark: z.enum(['.', ',']),
  headerLines: z.array(z.number().int()),
  firstDataLine: z.number().int(),
  lastDataLine: z.number().int(),
  lines: z.number().int(),
  columns: z.array(
    z.object({
      index: z.number().int(),
      name: z.string(),
      role: z.enum(['frequency', 'level', 'ignored']),
      unit: z.string(),
    }),
  ),
  axis: z.enum(['column', 'startStop', 'rows']),
  sentence: z.string(),
});
export type Understanding = z.infer<typeof Understanding>;

/** The whole capture. */
export const Capture = CaptureSummary.extend({
  mediaType: z.string(),
  /** Effective settings: the file's, then what people changed. */
  settings: Settings,
  /** Settings as the file alone states them. */
  fileSettings: Settings,
  traces: z.array(TraceSummary),
  problems: z.array(ReaderProblem),
  understanding: Understanding.nullable(),
  /** Newest first. */
  estimates: z.array(EstimateSummary),
  /** What the asking person may do. */
  may: z.object({ edit: z.boolean(), estimate: z.boolean(), submit: z.boolean() }),
});
export type Capture = z.infer<typeof Capture>;

/** One file of an upload: stored and queued, or the earlier capture with the same bytes, or refused. */
export const UploadItem = z.object({
  fileName: z.string(),
  id: z.uuid().nullable(),
  state: CaptureState.nullable(),
  /** True: the same bytes were already here and `id` is the earlier capture. */
  duplicate: z.boolean(),
  error: z.string().nullable(),
});
export type UploadItem = z.infer<typeof UploadItem>;

export const CaptureSort = z.enum(['newest', 'oldest', 'name', 'density', 'state']);
export type CaptureSort = z.infer<typeof CaptureSort>;

/** Query of the captures table. */
export const CaptureQuery = z.object({
  search: z.string().max(200).optional(),
  state: CaptureState.optional(),
  verdict: z.enum(['declared', 'other', 'none', 'undetermined']).optional(),
  campaignId: z.uuid().optional(),
  personId: z.uuid().optional(),
  since: z.iso.datetime().optional(),
  sort: CaptureSort.default('newest'),
  cursor: z.string().max(500).optional(),
  limit: z.coerce.number().int().min(1).max(200).default(50),
});
export type CaptureQuery = z.infer<typeof CaptureQuery>;

export const CaptureChanges = z.strictObject({
  name: z.string().trim().min(1).max(200).optional(),
  campaignId: z.uuid().nullable().optional(),
  settings: SettingChanges.optional(),
});
export type CaptureChanges = z.infer<typeof CaptureChanges>;

/** Points for the plot: `exact` has one level per frequency; `buckets` has min and max per equal part of the span. */
export const Points = z.discriminatedUnion('form', [
  z.object({
    form: z.literal('exact'),
    unit: LevelUnit,
    hz: z.array(z.number()),
    level: z.array(z.number()),
  }),
  z.object({
    form: z.literal('buckets'),
    unit: LevelUnit,
    hz: z.array(z.number()),
    min: z.array(z.number()),
    max: z.array(z.number()),
  }),
]);
export type Points = z.infer<typeof Points>;

export const Campaign = z.object({
  id: z.uuid(),
  name: z.string(),
  limitDbmPerHz: z.number().nullable(),
  captures: z.number().int(),
});
export type Campaign = z.infer<typeof Campaign>;

export const CampaignRequest = z.strictObject({
  name: z.string().trim().min(1).max(200),
  limitDbmPerHz: z.number().min(-300).max(100).nullable().optional(),
});
export type CampaignRequest = z.infer<typeof CampaignRequest>;

/** Query of the points: a part of the span, and at most how many points or buckets. */
export const PointsQuery = z.object({
  fromHz: z.coerce.number().optional(),
  toHz: z.coerce.number().optional(),
  buckets: z.coerce.number().int().min(1).max(200_000).default(4000),
});
export type PointsQuery = z.infer<typeof PointsQuery>;
