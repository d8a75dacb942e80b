import { EntitySchema } from 'typeorm';

/** The tenant: nobody sees another lab's data. */
export interface Lab {
  id: string;
  name: string;
  /** `HB` in HB-0371. */
  captureNumberPrefix: string;
  nextCaptureNumber: number;
  createdAt: Date;
}

export const LabEntity = new EntitySchema<Lab>({
  name: 'lab',
  columns: {
    id: { type: 'uuid', primary: true, primaryKeyConstraintName: 'lab_pk' },
    name: { type: 'text' },
    captureNumberPrefix: { type: 'text' },
    nextCaptureNumber: { type: 'int', default: 1 },
    createdAt: { type: 'timestamptz', default: () => 'now()' },
  },
  uniques: [{ name: 'lab_name_key', columns: ['name'] }],
});
