import { EntitySchema } from 'typeorm';
import { CaptureEntity } from './capture.ts';

/** A piece of a file, about 1 MiB. Rows are written once; the database refuses changes. */
export interface CaptureChunk {
  captureId: string;
  index: number;
  bytes: Buffer;
}

export const CaptureChunkEntity = new EntitySchema<CaptureChunk>({
  name: 'capture_chunk',
  columns: {
    captureId: {
      type: 'uuid',
      primary: true,
      primaryKeyConstraintName: 'capture_chunk_pk',
      foreignKey: {
        target: CaptureEntity,
        name: 'capture_chunk_capture_fk',
        onDelete: 'CASCADE',
        deferrable: 'INITIALLY DEFERRED',
      },
    },
    index: { type: 'int', primary: true, primaryKeyConstraintName: 'capture_chunk_pk' },
    bytes: { type: 'bytea' },
  },
});
