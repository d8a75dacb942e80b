import type { FilterShape, RbwKind } from '../../shared/settings.ts';
import { shapeWidths } from './filter-shape.ts';

/**
 * Noise bandwidth over the stated RBW: Bn = r·RBW (method, section 4).
 * Gaussian -3 dB: √(π/(4·ln 2)) = 1.06447, -6 dB: 0.75269; an RBW that already is the noise bandwidth: 1.
 */
export function noiseBandwidthRatio(shape: FilterShape, kind: RbwKind): number {
  const { noise, threeDb, sixDb } = shapeWidths(shape);
  switch (kind) {
    case '3dB':
      return noise / threeDb;
    case '6dB':
      return noise / sixDb;
    case 'noise':
      return 1;
  }
}

/** Full width at half power of a filter of a given noise bandwidth. */
export function threeDbWidthHz(shape: FilterShape, noiseBandwidthHz: number): number {
  const { noise, threeDb } = shapeWidths(shape);
  return (noiseBandwidthHz * threeDb) / noise;
}
