import { refuse } from './problems.ts';

const EXPORT = 'Save the trace as CSV from the analyser’s file menu and drop that.';

interface Magic {
  bytes: number[];
  at?: number;
  what: string;
  code: string;
  advice: string;
}

const text = (word: string) => Array.from(word, (letter) => letter.charCodeAt(0));

const MAGIC: Magic[] = [
  { bytes: [0x89, 0x50, 0x4e, 0x47], what: 'a PNG image', code: 'image', advice: EXPORT },
  { bytes: [0xff, 0xd8, 0xff], what: 'a JPEG image', code: 'image', advice: EXPORT },
  { bytes: text('GIF8'), what: 'a GIF image', code: 'image', advice: EXPORT },
  { bytes: [0x49, 0x49, 0x2a, 0x00], what: 'a TIFF image', code: 'image', advice: EXPORT },
  { bytes: [0x4d, 0x4d, 0x00, 0x2a], what: 'a TIFF image', code: 'image', advice: EXPORT },
  { bytes: text('WEBP'), at: 8, what: 'a WebP image', code: 'image', advice: EXPORT },
  { bytes: text('%PDF'), what: 'a PDF document', code: 'document', advice: EXPORT },
  { bytes: text('{\\rtf'), what: 'a word-processor document', code: 'document', advice: EXPORT },
  {
    bytes: [0x1f, 0x8b],
    what: 'a gzip archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: text('BZh'),
    what: 'a bzip2 archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: [0xfd, 0x37, 0x7a, 0x58, 0x5a],
    what: 'an xz archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: [0x28, 0xb5, 0x2f, 0xfd],
    what: 'a zstd archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: [0x37, 0x7a, 0xbc, 0xaf],
    what: 'a 7z archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: text('Rar!'),
    what: 'a RAR archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: text('ustar'),
    at: 257,
    what: 'a tar archive',
    code: 'archive',
    advice: 'Unpack it and drop the CSV inside.',
  },
  {
    bytes: [0xd0, 0xcf, 0x11, 0xe0],
    what: 'an old binary spreadsheet or document',
    code: 'spreadsheet',
    advice: 'Save the sheet as CSV and drop that.',
  },
  { bytes: [0x89, 0x48, 0x44, 0x46], what: 'an HDF5 data file', code: 'binary', advice: EXPORT },
  { bytes: text('MATLAB 5.0'), what: 'a MAT data file', code: 'binary', advice: EXPORT },
];

function startsWith(head: Uint8Array, { bytes, at = 0 }: Magic): boolean {
  return head.length >= at + bytes.length && bytes.every((byte, index) => head[at + index] === byte);
}

function refuseZip(head: Uint8Array): never {
  const names = new TextDecoder('latin1').decode(head);
  if (/xl\/|\[Content_Types\]|opendocument\.spreadsheet/.test(names))
    refuse(
      'spreadsheet',
      'This is a spreadsheet, not a trace export.',
      'Save the sheet as CSV and drop that.',
    );
  refuse('archive', 'This is a zip archive, not a trace export.', 'Unpack it and drop the CSV inside.');
}

/** Bytes that no text has: control characters besides tab, line ends, form feed and a trailing NUL or ^Z. */
function controlBytes(head: Uint8Array): { count: number; share: number } {
  let end = head.length;
  while (end > 0 && (head[end - 1] === 0 || head[end - 1] === 0x1a)) end -= 1;
  let control = 0;
  for (let i = 0; i < end; i += 1) {
    const byte = head[i];
    if (byte < 32 && byte !== 9 && byte !== 10 && byte !== 13 && byte !== 12 && byte !== 27) control += 1;
  }
  return { count: control, share: end === 0 ? 0 : control / end };
}

/**
 * Refuses what isn't a text table: empty files, images, documents, spreadsheets, archives, other binary files.
 * @param head the first bytes of the file
 * @param wide true for UTF-16, whose NUL bytes are no sign of a binary file
 */
export function refuseForeignBytes(head: Uint8Array, wide: boolean): void {
  if (head.length === 0)
    refuse(
      'empty',
      'This file is empty: 0 bytes.',
      'Export the trace again and check its size before you drop it.',
    );
  if (wide) return;
  const magic = MAGIC.find((candidate) => startsWith(head, candidate));
  if (magic) refuse(magic.code, `This is ${magic.what}, not a trace export.`, magic.advice);
  if (startsWith(head, { bytes: [0x50, 0x4b, 0x03, 0x04], what: '', code: '', advice: '' })) refuseZip(head);
  const { count, share } = controlBytes(head);
  if (share > 0.1 || (share > 0.01 && count > 8))
    refuse(
      'binary',
      `This is a binary file, not text: ${Math.round(share * 100)} % of its first ${head.length} bytes are control codes.`,
      EXPORT,
    );
}

/** Refuses text of another kind: web pages, XML, JSON, reflection and gain tables. */
export function refuseForeignText(head: string): void {
  const start = head.slice(0, 4096).trimStart();
  if (start === '' && head.trim() === '')
    refuse(
      'empty',
      'This file holds nothing but blanks and line ends.',
      'Export the trace again and check that it has rows before you drop it.',
    );
  if (/^<!doctype html|^<html|<html[\s>]/i.test(start))
    refuse(
      'webPage',
      'This is a web page, not a trace export.',
      'It’s often a sign-in page saved in place of the download: sign in there, download again, then drop the CSV.',
      1,
    );
  if (/^<\?xml|^<[a-z][\w:-]*[\s>/]/i.test(start))
    refuse('markup', 'This is an XML document, not a trace table.', EXPORT, 1);
  const option = /^[ \t]{0,8}#[ \t]*(?:[kmg]?hz)[ \t]+[syzgh][ \t]+(?:ma|db|ri)\b/im.exec(
    head.slice(0, 65536),
  );
  if (option)
    refuse(
      'networkParameters',
      'This is a table of network parameters (reflection or gain), not a spectrum.',
      'Export the spectrum trace with its levels in dBm.',
      head.slice(0, option.index).split(/\r\n|\n|\r/).length,
    );
}
