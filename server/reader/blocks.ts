import type { Lost, Segment, Table } from './table.ts';
import { commentText } from './split-line.ts';

const MOST_CARRIED = 500;

/** Rows that form one table: a capture has one, or several below one another. */
export interface Block {
  fromRow: number;
  toRow: number;
  firstLine: number;
  /** Text between the block before and this one; empty for the first. */
  before: Segment['before'];
  broken: Lost;
  /** Rows that were interrupted by text and go on after it: the lines of that text. */
  interruptions: number[];
}

export interface Blocks {
  blocks: Block[];
  /** Lines of what stands after the data and isn't data. */
  footer: { fromLine: number; rows: number } | null;
}

function addLost(to: Lost, from: Lost): void {
  to.count += from.count;
  to.lines.push(...from.lines.slice(0, 20));
}

/** True where a segment goes on where the block stopped. */
function goesOn(block: Block, segment: Segment, axis: Float64Array | null): boolean {
  if (!axis) return segment.before.every(({ text }) => commentText(text) !== null);
  const last = axis[block.toRow - 1];
  const next = axis[segment.fromRow];
  const rows = block.toRow - block.fromRow;
  if (rows < 2) return true;
  const step = (last - axis[block.fromRow]) / (rows - 1);
  const ahead = (next - last) / step;
  return ahead > 0 && ahead < Math.max(5, 0.05 * rows + 2 + segment.before.length + segment.broken.count);
}

/** True where a segment is a table like the block: as long, or beginning at the same frequency. */
function isLike(block: Block, segment: Segment, axis: Float64Array | null): boolean {
  const rows = block.toRow - block.fromRow;
  const own = segment.toRow - segment.fromRow;
  if (own < 3 || own < 0.1 * rows) return false;
  if (!axis) return Math.abs(own - rows) <= 1;
  return own > 10 || own >= 0.5 * rows;
}

/** Sorts the runs of rows into tables; what follows and fits none is the footer. */
export function sortBlocks(table: Table, axis: Float64Array | null): Blocks {
  const blocks: Block[] = [];
  let footer: Blocks['footer'] = null;
  let carried: Segment['before'] = [];
  for (const segment of table.segments) {
    const block = blocks.at(-1);
    const before = carried.length > 0 ? [...carried, ...segment.before].slice(-MOST_CARRIED) : segment.before;
    if (block && footer === null && block.toRow === segment.fromRow && goesOn(block, segment, axis)) {
      block.toRow = segment.toRow;
      addLost(block.broken, segment.broken);
      block.interruptions.push(
        ...segment.before.filter(({ text }) => commentText(text) === null).map(({ line }) => line),
      );
    } else if (!block || isLike(blocks[0], segment, axis)) {
      blocks.push({
        fromRow: segment.fromRow,
        toRow: segment.toRow,
        firstLine: segment.firstLine,
        before: block ? before : [],
        broken: { count: segment.broken.count, lines: [...segment.broken.lines] },
        interruptions: [],
      });
      carried = [];
      footer = null;
    } else {
      footer ??= { fromLine: before[0]?.line ?? segment.firstLine, rows: 0 };
      footer.rows += segment.toRow - segment.fromRow;
      carried = before;
    }
  }
  return { blocks, footer };
}
