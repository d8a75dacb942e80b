import { z } from 'zod';
import { CaptureState } from './capture.ts';

/** A message of `GET /api/events`. Says what changed; the client asks for the object itself. */
export const LabEvent = z.discriminatedUnion('kind', [
  z.object({
    kind: z.literal('captureChanged'),
    labId: z.uuid(),
    captureId: z.uuid(),
    state: CaptureState,
    progress: z.object({ points: z.number().int(), ofPoints: z.number().int().nullable() }).nullable(),
  }),
  z.object({ kind: z.literal('estimateMade'), labId: z.uuid(), captureId: z.uuid(), estimateId: z.uuid() }),
]);
export type LabEvent = z.infer<typeof LabEvent>;
