import type uPlot from 'uplot';
import type { Estimate } from '../../../../shared/estimate.ts';
import { fixed, frequencyDecimals, frequencyScale } from '../../../lib/format.ts';
import { token } from '../../../lib/theme.ts';
import type { Highlight } from '../contract.ts';
import { mergedSpans } from './plot-data.ts';
import type { Span } from './zoom.ts';

/** What is drawn over and under the trace. */
export interface Scene {
  estimate: Estimate | null;
  brush: Span | null;
  highlight: Highlight;
  spurHz: number | null;
  compact: boolean;
}

const MOST_LABELS = 12;

const clip = (u: uPlot, draw: (ctx: CanvasRenderingContext2D, ratio: number) => void) => {
  const { left, top, width, height } = u.bbox;
  u.ctx.save();
  u.ctx.beginPath();
  u.ctx.rect(left, top, width, height);
  u.ctx.clip();
  draw(u.ctx, devicePixelRatio);
  u.ctx.restore();
};

const x = (u: uPlot, hz: number) => u.valToPos(hz, 'x', true);
const y = (u: uPlot, db: number) => u.valToPos(db, 'y', true);

/** Ground, and the spans that are left out, under the trace. */
export function drawGround(u: uPlot, { estimate, brush }: Scene): void {
  const { left, top, width, height } = u.bbox;
  u.ctx.fillStyle = token('sheet');
  u.ctx.fillRect(left, top, width, height);
  clip(u, (ctx, ratio) => {
    for (const { fromHz, toHz } of mergedSpans(estimate?.exclusions ?? [])) {
      const from = x(u, fromHz);
      const wide = Math.max(2 * ratio, x(u, toHz) - from);
      ctx.save();
      ctx.beginPath();
      ctx.rect(from, top, wide, height);
      ctx.clip();
      ctx.strokeStyle = token('spur');
      ctx.globalAlpha = 0.3;
      ctx.lineWidth = 0.7 * ratio;
      ctx.beginPath();
      for (let start = from - height; start < from + wide; start += 6 * ratio) {
        ctx.moveTo(start, top + height);
        ctx.lineTo(start + height, top);
      }
      ctx.stroke();
      ctx.restore();
      ctx.strokeStyle = token('spur');
      ctx.globalAlpha = 0.55;
      ctx.lineWidth = 0.7 * ratio;
      ctx.strokeRect(from, top - ratio, wide, height + 2 * ratio);
      ctx.globalAlpha = 1;
    }
    if (brush) {
      ctx.fillStyle = token('warn-g');
      ctx.globalAlpha = 0.22;
      ctx.fillRect(x(u, brush.fromHz), top, x(u, brush.toHz) - x(u, brush.fromHz), height);
      ctx.globalAlpha = 1;
    }
  });
}

/** Floor with its ribbon, spurs, baseline and the strip of used points, over the trace. */
export function drawMarks(u: uPlot, scene: Scene): void {
  const { estimate } = scene;
  if (estimate) {
    clip(u, (ctx, ratio) => {
      drawFloor(u, ctx, ratio, scene, estimate);
      drawSpurs(u, ctx, ratio, scene, estimate);
    });
    drawMargin(u, estimate, scene.compact);
  }
  const { left, top, width, height } = u.bbox;
  u.ctx.fillStyle = token('ink');
  u.ctx.fillRect(left, top + height, width, devicePixelRatio);
  drawStrip(u, scene);
}

function drawFloor(
  u: uPlot,
  ctx: CanvasRenderingContext2D,
  ratio: number,
  { highlight }: Scene,
  estimate: Estimate,
): void {
  const { hz, levelDbm } = estimate.floor;
  const reachDb = estimate.density?.expandedUncertaintyDb ?? 0;
  if (hz.length === 0) return;
  const path = (offsetDb: number, reverse = false) => {
    const order = reverse ? [...hz.keys()].reverse() : [...hz.keys()];
    for (const i of order) ctx.lineTo(x(u, hz[i]), y(u, levelDbm[i] + offsetDb));
  };
  ctx.beginPath();
  path(reachDb);
  path(-reachDb, true);
  ctx.closePath();
  ctx.fillStyle = token('estw');
  ctx.fill();
  ctx.beginPath();
  path(0);
  ctx.strokeStyle = token('est');
  ctx.lineWidth = (highlight === 'mean' ? 3 : 1.8) * ratio;
  ctx.stroke();
}

function drawSpurs(
  u: uPlot,
  ctx: CanvasRenderingContext2D,
  ratio: number,
  { spurHz, compact }: Scene,
  { spurs, input }: Estimate,
): void {
  const { top, height, left, width } = u.bbox;
  const scale = frequencyScale(input.lastHz);
  const decimals = Math.min(3, frequencyDecimals(input.spacingHz, scale));
  ctx.font = `${11 * ratio}px "Noto Sans Mono", monospace`;
  let free = -Infinity;
  const inView = spurs.filter(({ hz }) => x(u, hz) >= left && x(u, hz) <= left + width);
  spurs.forEach(({ hz, levelDbm, correctedLevelDbm, leftOut }, index) => {
    const atX = x(u, hz);
    const atY = y(u, levelDbm);
    if (atX < left || atX > left + width) return;
    ctx.strokeStyle = token('spur');
    ctx.fillStyle = token('spur');
    ctx.globalAlpha = leftOut ? 1 : 0.5;
    ctx.lineWidth = (hz === spurHz ? 2.4 : 1.2) * ratio;
    ctx.beginPath();
    ctx.moveTo(atX, atY);
    ctx.lineTo(atX, top + height);
    ctx.stroke();
    const size = (hz === spurHz ? 5 : 3.5) * ratio;
    ctx.beginPath();
    ctx.moveTo(atX, atY - size);
    ctx.lineTo(atX + size, atY);
    ctx.lineTo(atX, atY + size);
    ctx.lineTo(atX - size, atY);
    ctx.closePath();
    ctx.fill();
    if (inView.length > MOST_LABELS && hz !== spurHz) return;
    const shown = fixed(correctedLevelDbm ?? levelDbm, 1);
    const lines = compact
      ? [`S${index + 1} ${shown}`]
      : [`S${index + 1} ${fixed(hz / scale.hz, decimals)} ${scale.unit}`, `${shown} dBm`];
    const wide = Math.max(...lines.map((line) => ctx.measureText(line).width));
    const right = atX + 8 * ratio + wide < left + width;
    const from = right ? atX + 8 * ratio : atX - 8 * ratio - wide;
    if (from < free) return;
    free = from + wide + 4 * ratio;
    ctx.textAlign = 'left';
    lines.forEach((line, i) => ctx.fillText(line, from, Math.max(atY, top + 12 * ratio) + i * 14 * ratio));
  });
  ctx.globalAlpha = 1;
}

function drawMargin(u: uPlot, { floor, density, ledger }: Estimate, compact: boolean): void {
  const reading = ledger.find(({ kind }) => kind === 'reading');
  if (reading === undefined || floor.levelDbm.length === 0 || compact) return;
  const { ctx } = u;
  const { left, width } = u.bbox;
  const ratio = devicePixelRatio;
  ctx.font = `${11 * ratio}px "Noto Sans Mono", monospace`;
  ctx.fillStyle = token('est');
  ctx.textAlign = 'left';
  const atY = y(u, floor.levelDbm[floor.levelDbm.length - 1]);
  ctx.fillText(fixed(reading.valueDb, 2), left + width + 7 * ratio, atY - 2 * ratio);
  if (density)
    ctx.fillText(`±${fixed(density.expandedUncertaintyDb, 2)}`, left + width + 7 * ratio, atY + 12 * ratio);
}

function drawStrip(u: uPlot, { estimate, brush }: Scene): void {
  const { left, top, width, height } = u.bbox;
  const ratio = devicePixelRatio;
  const atY = top + height + 5 * ratio;
  const bar = (fromHz: number, toHz: number, colour: string) => {
    const from = Math.max(left, x(u, fromHz));
    const to = Math.min(left + width, x(u, toHz));
    if (to <= from) return;
    u.ctx.fillStyle = colour;
    u.ctx.fillRect(from, atY, to - from, 3 * ratio);
  };
  if (estimate === null) return;
  bar(estimate.input.firstHz, estimate.input.lastHz, token('est'));
  for (const { fromHz, toHz } of mergedSpans(estimate.exclusions)) bar(fromHz, toHz, token('paper'));
  if (brush) bar(brush.fromHz, brush.toHz, token('warn-g'));
}
