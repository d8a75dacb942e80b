import type { Estimate as EstimateJson, EstimateSummary, EngineEstimate } from '../../shared/estimate.ts';
import type { Estimate } from '../entities/estimate.ts';

/** Who made it: the author, or the arrival of the file. */
const ON_ARRIVAL = 'on arrival';

export function presentEstimateSummary(estimate: Estimate): EstimateSummary {
  return {
    id: estimate.id,
    number: estimate.number,
    state: estimate.state,
    change: estimate.change,
    createdAt: estimate.createdAt.toISOString(),
    createdBy: estimate.author?.name ?? ON_ARRIVAL,
    verdict: estimate.verdict,
    verdictSummary: estimate.verdictSummary,
    dbmPerHz: estimate.dbmPerHz,
    lowDbmPerHz: estimate.lowDbmPerHz,
    highDbmPerHz: estimate.highDbmPerHz,
    expandedUncertaintyDb: estimate.expandedUncertaintyDb,
    spurs: estimate.spurs,
    stops: estimate.stops,
    cautions: estimate.cautions,
  };
}

export function presentEstimate(estimate: Estimate): EstimateJson {
  return {
    ...estimate.body,
    id: estimate.id,
    captureId: estimate.captureId,
    number: estimate.number,
    state: estimate.state,
    change: estimate.change,
    createdAt: estimate.createdAt.toISOString(),
    createdBy: estimate.author?.name ?? ON_ARRIVAL,
  };
}

/** A computation that isn't kept. */
export function presentWhatIf(body: EngineEstimate, captureId: string, change: string | null): EstimateJson {
  return {
    ...body,
    id: null,
    captureId,
    number: null,
    state: null,
    change,
    createdAt: null,
    createdBy: null,
  };
}
