import { boundedPart, statedPart, type BudgetPart } from './budget.ts';
import { type DensityWalk, skirtUncertaintyDb } from './density-walk.ts';
import type { EffectiveSettings } from './effective-settings.ts';
import type { Survey } from './survey.ts';
import { DB_PER_NEPER } from './units.ts';

/**
 * Noise bandwidth of near-Gaussian resolution filters over their -3 dB width: 1.05 to 1.13 (Agilent Technologies,
 * Application Note 150, page 67). Where the shape is assumed Gaussian, 1.0645, this is how far it may be off, dB.
 */
const ASSUMED_SHAPE_HALF_WIDTH_DB = 10 * Math.log10(1.13 / 1.0645);

/** The parts of the uncertainty of a density (JCGM 100): statistics, then what is stated and what isn't. */
export function budgetParts(
  effective: EffectiveSettings,
  survey: Survey,
  walk: DensityWalk,
  unit: 'dBm' | 'dBm/Hz',
  quantizationStepDb: number | null,
  biasUncertaintyDb: number,
): BudgetPart[] {
  const { values } = effective;
  const { sensitivity } = walk;
  const parts: BudgetPart[] = [
    {
      id: 'statistics',
      label: 'Scatter of the points',
      type: 'A',
      distribution: 'gamma',
      halfWidthDb: null,
      standardUncertaintyDb: walk.statisticalDb,
      degreesOfFreedom: Number.isFinite(walk.degreesOfFreedom) ? walk.degreesOfFreedom : null,
      source: 'scatter and autocorrelation of the kept points',
    },
  ];
  if (quantizationStepDb !== null) {
    const halfWidthDb =
      (sensitivity * quantizationStepDb) / 2 / Math.sqrt(Math.max(1, survey.independent.effectivePoints));
    parts.push(
      boundedPart(
        { id: 'rounding', label: 'Rounding of the export', source: 'step of the levels in the file' },
        'rectangular',
        halfWidthDb,
      ),
    );
  }
  if (biasUncertaintyDb > 0) {
    parts.push(
      statedPart(
        {
          id: 'averaging',
          label: 'Averaging model',
          source: 'effective number of a video filter, against simulation',
        },
        sensitivity * biasUncertaintyDb,
      ),
    );
  }
  if (walk.skirtCorrectionDb !== 0) {
    parts.push(
      statedPart(
        { id: 'skirts', label: 'Skirts of the spurs', source: 'half of the correction, rectangular' },
        sensitivity * skirtUncertaintyDb(walk.skirtCorrectionDb),
      ),
    );
  }
  if (unit === 'dBm') parts.push(...bandwidthParts(effective, sensitivity));
  parts.push(
    statedPart(
      { id: 'level', label: 'Absolute level', source: 'instrument’s calibration' },
      values.levelUncertaintyDb === undefined ? undefined : sensitivity * values.levelUncertaintyDb,
    ),
  );
  if (values.ownNoiseDbmPerHz !== undefined) {
    parts.push(
      statedPart(
        { id: 'ownNoise', label: 'Analyser’s own noise', source: 'capture with the input terminated' },
        values.ownNoiseUncertaintyDb === undefined
          ? undefined
          : (sensitivity - 1) * values.ownNoiseUncertaintyDb,
      ),
    );
  }
  if (values.externalGainDb !== undefined) {
    parts.push(
      statedPart(
        { id: 'gain', label: 'External gain', source: 'calibration of cable or amplifier' },
        values.externalGainUncertaintyDb,
      ),
    );
  }
  parts.push(
    statedPart({ id: 'fidelity', label: 'Log fidelity', source: 'not stated' }, undefined),
    statedPart({ id: 'mismatch', label: 'Mismatch', source: 'not stated' }, undefined),
  );
  return parts;
}

function bandwidthParts({ values, assumed }: EffectiveSettings, sensitivity: number): BudgetPart[] {
  const label = 'Noise bandwidth';
  if (values.bandwidthRatio !== undefined) {
    const u = values.bandwidthRatioUncertainty;
    return [
      statedPart(
        { id: 'bandwidth', label, source: 'measured ratio' },
        u === undefined ? undefined : (sensitivity * DB_PER_NEPER * u) / values.bandwidthRatio,
      ),
    ];
  }
  if (!assumed.has('filterShape')) {
    return [
      statedPart(
        { id: 'bandwidth', label, source: 'exact for the stated shape; tolerance of the RBW not stated' },
        undefined,
      ),
    ];
  }
  return [
    boundedPart(
      {
        id: 'bandwidth',
        label,
        source: 'assumed shape; Agilent Technologies, Application Note 150, page 67',
      },
      'rectangular',
      sensitivity * ASSUMED_SHAPE_HALF_WIDTH_DB,
    ),
  ];
}
