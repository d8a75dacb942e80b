import { EntitySchema } from 'typeorm';
import type { LevelUnit } from '../../shared/capture.ts';
import type { Settings } from '../../shared/settings.ts';
import { CaptureEntity } from './capture.ts';

/** One trace of a capture. Frequencies (Hz) and levels (dB) are arrays of little-endian doubles. */
export interface Trace {
  captureId: string;
  index: number;
  name: string;
  unit: LevelUnit;
  unitInFile: string;
  points: number;
  firstHz: number;
  lastHz: number;
  spacingHz: number;
  uniform: boolean;
  minLevel: number;
  maxLevel: number;
  settings: Settings;
  frequencies: Buffer;
  levels: Buffer;
}

export const TraceEntity = new EntitySchema<Trace>({
  name: 'trace',
  columns: {
    captureId: {
      type: 'uuid',
      primary: true,
      primaryKeyConstraintName: 'trace_pk',
      foreignKey: { target: CaptureEntity, name: 'trace_capture_fk', onDelete: 'CASCADE' },
    },
    index: { type: 'int', primary: true, primaryKeyConstraintName: 'trace_pk' },
    name: { type: 'text' },
    unit: { type: 'text' },
    unitInFile: { type: 'text' },
    points: { type: 'int' },
    firstHz: { type: 'float8' },
    lastHz: { type: 'float8' },
    spacingHz: { type: 'float8' },
    uniform: { type: 'boolean' },
    minLevel: { type: 'float8' },
    maxLevel: { type: 'float8' },
    settings: { type: 'jsonb', default: {} },
    frequencies: { type: 'bytea', select: false },
    levels: { type: 'bytea', select: false },
  },
});
