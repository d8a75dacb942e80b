import type { Capture as CaptureJson, CaptureSummary, TraceSummary } from '../../shared/capture.ts';
import type { Capture } from '../entities/capture.ts';
import type { Estimate } from '../entities/estimate.ts';
import type { Trace } from '../entities/trace.ts';
import { editCapture } from '../policies/captures.ts';
import { makeEstimate, submitEstimate } from '../policies/estimates.ts';
import type { Actor } from '../policies/verdict.ts';
import { effectiveSettings } from '../services/setting-changes.ts';
import { presentEstimateSummary } from './estimate.ts';

export function presentCaptureSummary(capture: Capture): CaptureSummary {
  const { uploader, campaign, latestEstimate } = capture;
  return {
    id: capture.id,
    labId: capture.labId,
    number: capture.number,
    name: capture.name,
    fileName: capture.fileName,
    bytes: capture.bytes,
    sha256: capture.sha256,
    state: capture.state,
    progress:
      capture.state === 'reading' && capture.progressPoints !== null
        ? { points: capture.progressPoints, ofPoints: capture.progressOfPoints }
        : null,
    campaign: campaign ? { id: campaign.id, name: campaign.name } : null,
    uploadedAt: capture.createdAt.toISOString(),
    uploadedBy: { id: capture.uploaderId, name: uploader?.name ?? '' },
    points: capture.points,
    centreHz: capture.centreHz,
    spanHz: capture.spanHz,
    rbwHz: capture.rbwHz,
    sparkline: capture.sparkline,
    estimate: latestEstimate ? presentEstimateSummary(latestEstimate) : null,
    problem: capture.problems.find(({ severity }) => severity === 'stop') ?? null,
  };
}

export function presentTrace(trace: Trace): TraceSummary {
  const {
    index,
    name,
    points,
    firstHz,
    lastHz,
    spacingHz,
    uniform,
    unit,
    unitInFile,
    minLevel,
    maxLevel,
    settings,
  } = trace;
  return {
    index,
    name,
    points,
    firstHz,
    lastHz,
    spacingHz,
    uniform,
    unit,
    unitInFile,
    minLevel,
    maxLevel,
    settings,
  };
}

/** The whole capture as one person sees it. */
export function presentCapture(
  capture: Capture,
  traces: Trace[],
  estimates: Estimate[],
  actor: Actor,
): CaptureJson {
  return {
    ...presentCaptureSummary(capture),
    mediaType: capture.mediaType,
    settings: effectiveSettings(capture.fileSettings, {}, capture.settingChanges),
    fileSettings: capture.fileSettings,
    traces: traces.map(presentTrace),
    problems: capture.problems,
    understanding: capture.understanding,
    estimates: estimates.map(presentEstimateSummary),
    may: {
      edit: editCapture(actor, capture) === 'allowed',
      estimate: makeEstimate(actor, capture) === 'allowed',
      submit: submitEstimate(actor, capture) === 'allowed',
    },
  };
}
