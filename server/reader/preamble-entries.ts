import { z } from 'zod';
import { commentText, type Delimiter, isBlankLine, splitLine, withoutEmptyTail } from './split-line.ts';
import { keyMeaning, leadingKey } from './setting-names.ts';
import { detectorFromText, scaleFromText, switchFromText } from './setting-words.ts';
import { isUnit } from './units.ts';

/** One statement of the preamble. */
export interface Entry {
  key: string;
  /** One value, or one per trace. */
  values: string[];
  /** Unit beside the key or in a cell of its own. */
  unit: string;
  /** Trace that a section or the key names, from 1. */
  trace: number | null;
  /** Counted from 1. */
  line: number;
  text: string;
}

const JsonLine = z.record(z.string(), z.unknown());

const UNIT_CELL = /^(?:ohms?|Ω|Ω|K|°C|%|k|M|G)$/i;
const LONGEST_KEY = 120;
const MODE_CELL = /^(?:auto|man|manual|fixed|coupled|x)$/i;

/** Key without the unit or kind that it carries: `RBW [kHz]`, `RBW (-3 dB)`, `Start/MHz`, `rbw_hz`. */
export function keyAndUnit(text: string): { key: string; unit: string } {
  if (text.length > LONGEST_KEY) return { key: text, unit: '' };
  const plain = text
    .trim()
    .replace(/^"|"$/g, '')
    .replace(/[\s:=.]+$/, '');
  const bracket = /^(.*?)\s*[[(]\s*([^\])]*)\s*[\])]\s*$/.exec(plain);
  if (bracket && bracket[1] !== '') return { key: bracket[1], unit: bracket[2].trim() };
  if (keyMeaning(plain) !== null) return { key: plain, unit: '' };
  for (const cut of plain.matchAll(/[/_\s,]+/g)) {
    const rest = plain.slice(cut.index + cut[0].length);
    if (cut.index > 0 && (isUnit(rest) || UNIT_CELL.test(rest)))
      return { key: plain.slice(0, cut.index), unit: rest };
  }
  const glued = /^(.*[a-zA-Z])(Hz|kHz|MHz|GHz|Dbm?|DB|Ms)$/.exec(plain);
  return glued && keyMeaning(glued[1]) !== null
    ? { key: glued[1], unit: glued[2] }
    : { key: plain, unit: '' };
}

function withTrace(key: string): { key: string; trace: number | null } {
  const match = /^(?:trace|tr|trc|messkurve|courbe|traza)\s*[#_-]?\s*(\d{1,2})\s*[-:._ ]\s*(.+)$/i.exec(
    key.trim(),
  );
  return match ? { key: match[2], trace: Number(match[1]) } : { key, trace: null };
}

/** Where no key of ours fits, a prefix such as `#4117` or a lone length glued to the first key is taken off. */
function withoutLengthPrefix(key: string): string {
  const match = /^#?\d{1,8}\s*(?=[A-Za-z])(.*)$/.exec(key);
  return match && keyMeaning(key) === null && keyMeaning(keyAndUnit(match[1]).key) !== null ? match[1] : key;
}

/** Cells after the key: the value, its unit, or one value per trace. */
function valueCells(cells: string[]): { values: string[]; unit: string } {
  const [value = '', next = '', ...others] = cells;
  if (next !== '' && (isUnit(next) || UNIT_CELL.test(next)) && /\d/.test(value))
    return { values: [value], unit: next };
  if (next === '' || MODE_CELL.test(next)) return { values: [value], unit: '' };
  const modes = others.length > 0 && others.every((cell) => cell === '' || MODE_CELL.test(cell));
  return { values: modes ? [value, next] : cells, unit: '' };
}

function splitAtSign(text: string): { key: string; value: string } | null {
  const match = /^\s*"?([^:=\t;,|]{1,80}?)"?\s*(?::(?!\/\/)|=)\s*(.*)$/.exec(text);
  return match ? { key: match[1], value: match[2] } : null;
}

function cellsOf(text: string, delimiter: Delimiter): string[] {
  const tries: Delimiter[] = [delimiter === ' ' ? '\t' : delimiter, '\t', ';', ',', '|'];
  for (const candidate of tries) {
    const cells = withoutEmptyTail(splitLine(text, candidate));
    if (cells.length > 1) return cells;
  }
  const blanks = text.trim().split(/\s{2,}/);
  return blanks.length > 1 ? blanks : [text.trim()];
}

/** True for what can be a value, so that prose beginning with a key’s word (`Start of the survey`) states nothing. */
function saysValue(text: string): boolean {
  return (
    /^[+\-−]?[.,]?\d/.test(text) ||
    detectorFromText(text) !== null ||
    scaleFromText(text) !== null ||
    switchFromText(text) !== null
  );
}

/** All statements of one line; `text` is free of comment marks. */
function entriesOf(text: string, delimiter: Delimiter): { key: string; values: string[]; unit: string }[] {
  if (/^\s*\{.*\}\s*,?\s*$/.test(text)) {
    try {
      const parsed = JsonLine.safeParse(JSON.parse(text.replace(/,\s*$/, '')));
      if (parsed.success)
        return Object.entries(parsed.data).flatMap(([key, value]) =>
          typeof value === 'string' || typeof value === 'number' || typeof value === 'boolean'
            ? [{ key, values: [String(value)], unit: '' }]
            : [],
        );
    } catch {
      return [];
    }
  }
  const sign = splitAtSign(text);
  const cells = cellsOf(text, delimiter);
  const signed = cells.map(splitAtSign);
  if (cells.length > 1 && signed.every((cell) => cell !== null))
    return signed.flatMap((cell) => (cell ? [{ key: cell.key, values: [cell.value], unit: '' }] : []));
  if (sign && keyMeaning(keyAndUnit(sign.key).key) !== null) {
    const parts = sign.value.replace(/^\s*[,;\t]\s*/, '');
    const inner = delimiter === ' ' ? [parts] : withoutEmptyTail(splitLine(parts, delimiter));
    return [{ key: sign.key, ...valueCells(inner.length === 0 ? [''] : inner) }];
  }
  const [first, ...others] = cells;
  if (others.length > 0) {
    const pairs = cells.length % 2 === 0 && cells.length > 2;
    const keys = cells.filter((_, index) => index % 2 === 0);
    if (pairs && keys.every((key) => keyMeaning(keyAndUnit(key).key) !== null))
      return keys.map((key, index) => ({ key, values: [cells[2 * index + 1]], unit: '' }));
    return [{ key: first, ...valueCells(others) }];
  }
  if (sign) return [{ key: sign.key, values: [sign.value], unit: '' }];
  const leading = leadingKey(text);
  return leading && saysValue(leading.rest) ? [{ key: leading.key, values: [leading.rest], unit: '' }] : [];
}

/** A row of keys over a row of values: `RBW;VBW;Sweep time` over `10 kHz;1 MHz;25 ms`. */
function keyRow(cells: string[]): boolean {
  const known = cells.filter((cell) => keyMeaning(keyAndUnit(cell).key) !== null).length;
  return cells.length >= 3 && known >= 3 && known >= cells.length - 1;
}

/**
 * The preamble's statements, line by line.
 * @param lines the lines before (or between) the numbers
 * @param firstLine number of the first of them, from 1
 */
export function preambleEntries(lines: string[], firstLine: number, delimiter: Delimiter): Entry[] {
  const entries: Entry[] = [];
  let section: number | null = null;
  let pendingKeys: string[] | null = null;
  lines.forEach((raw, index) => {
    if (isBlankLine(raw) || raw.length > 1000) return;
    const text = (commentText(raw) ?? raw).replace(/[\u0000\u001a]/g, ' ').trim();
    const line = firstLine + index;
    const named = /^\[?\s*(?:trace|tr|messkurve|courbe|traza)\s*#?(\d{1,2})\s*\]?\s*:?\s*[,;\t]*$/i.exec(
      text,
    );
    if (named) {
      section = Number(named[1]);
      return;
    }
    if (/^\[[^\]]*\]\s*[,;\t]*$/.test(text)) {
      section = null;
      return;
    }
    const cells = cellsOf(text, delimiter);
    const add = (key: string, values: string[], unit: string) => {
      const traced = withTrace(index === 0 ? withoutLengthPrefix(key) : key);
      const own = keyAndUnit(traced.key);
      entries.push({
        key: own.key,
        values,
        unit: unit || own.unit,
        trace: traced.trace ?? section,
        line,
        text: raw.trim().slice(0, 200),
      });
    };
    if (pendingKeys && pendingKeys.length >= cells.length) {
      pendingKeys.slice(0, cells.length).forEach((key, column) => add(key, [cells[column]], ''));
      pendingKeys = null;
      return;
    }
    pendingKeys = keyRow(cells) ? cells : null;
    if (pendingKeys) return;
    for (const { key, values, unit } of entriesOf(text, delimiter)) add(key, values, unit);
  });
  return entries;
}
