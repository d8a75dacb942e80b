// Node 20's worker threads ignore `--import tsx`, so that a thread that runs the sources registers it itself.
import { register } from 'tsx/esm/api';

register();

export const { estimate, points, warmUp } = await import('./tasks.ts');
