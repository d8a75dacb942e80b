import type { Stage } from '../../server/engine/point-law.ts';

/** A stage of a chain, in short. */
export const stage = (scale: Stage['scale'], values: number): Stage => ({ place: 'sweeps', scale, values });

/** 10·log10 of a power, without the engine's own conversion. */
export const db = (power: number) => 10 * Math.log10(power);
