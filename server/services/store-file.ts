import { createHash } from 'node:crypto';
import type { Readable } from 'node:stream';
import type { EntityManager, QueryRunner } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';
import type { UploadItem } from '../../shared/capture.ts';
import type { SettingOverrides } from '../entities/capture.ts';
import type { Actor } from '../policies/verdict.ts';
import { announce } from './announce.ts';
import { recordAudit } from './audit.ts';
import type { Context } from './context.ts';
import { tooLarge, tooSlow } from './problems.ts';
import type { Gate } from './gate.ts';

export const CHUNK_BYTES = 1024 * 1024;

export interface IncomingFile {
  fileName: string;
  mediaType: string;
  /** The bytes; busboy sets `truncated` where the size limit cut them. */
  stream: Readable & { truncated?: boolean };
}

export interface UploadTarget {
  labId: string;
  campaignId: string | null;
  settingChanges: SettingOverrides;
}

/** Ends the stream when nothing arrives for `idleMs` while somebody waits for it. */
async function* timed(stream: Readable, idleMs: number): AsyncGenerator<Buffer> {
  const arriving = stream.iterator({ destroyOnReturn: true });
  const end = () =>
    stream.destroy(
      tooSlow(`Nothing arrived for ${idleMs / 1000} s, so the upload was ended; send the file again.`),
    );
  try {
    for (;;) {
      const timer = setTimeout(end, idleMs);
      const next = await arriving.next().finally(() => clearTimeout(timer));
      if (next.done) return;
      yield next.value;
    }
  } finally {
    await arriving.return?.();
  }
}

/** Gathers what arrives into pieces of 1 MiB; the last one may be shorter. */
async function* pieces(stream: AsyncIterable<Buffer>): AsyncGenerator<Buffer> {
  let piece = Buffer.allocUnsafe(CHUNK_BYTES);
  let filled = 0;
  for await (const data of stream) {
    let taken = 0;
    while (taken < data.length) {
      const copied = data.copy(piece, filled, taken);
      taken += copied;
      filled += copied;
      if (filled === CHUNK_BYTES) {
        yield piece;
        piece = Buffer.allocUnsafe(CHUNK_BYTES);
        filled = 0;
      }
    }
  }
  if (filled > 0) yield piece.subarray(0, filled);
}

async function storePieces(
  runner: QueryRunner,
  captureId: string,
  first: Buffer | null,
  rest: AsyncGenerator<Buffer>,
): Promise<{ sha256: string; bytes: number }> {
  const hash = createHash('sha256');
  let bytes = 0;
  let index = 0;
  for (let piece = first; piece !== null;) {
    hash.update(piece);
    bytes += piece.length;
    await runner.query('INSERT INTO capture_chunk (capture_id, index, bytes) VALUES ($1, $2, $3)', [
      captureId,
      index,
      piece,
    ]);
    index += 1;
    const next = await rest.next();
    piece = next.done ? null : next.value;
  }
  return { sha256: hash.digest('hex'), bytes };
}

async function earlierCapture(manager: EntityManager, labId: string, sha256: string) {
  const [earlier] = await manager.query<{ id: string; state: UploadItem['state'] }[]>(
    'SELECT id, state FROM capture WHERE lab_id = $1 AND sha256 = $2',
    [labId, sha256],
  );
  return earlier;
}

/** The lab's row is locked until the transaction ends: uploads of one lab take their numbers one after the other. */
async function nextNumber(manager: EntityManager, labId: string): Promise<string> {
  const [[lab]] = await manager.query<[{ prefix: string; number: number }[], number]>(
    `UPDATE lab SET next_capture_number = next_capture_number + 1 WHERE id = $1
     RETURNING capture_number_prefix AS prefix, next_capture_number - 1 AS number`,
    [labId],
  );
  return `${lab.prefix}-${String(lab.number).padStart(4, '0')}`;
}

const withoutExtension = (fileName: string) => fileName.replace(/(?<=.)\.[^.]{1,8}$/, '');

async function insertCapture(
  manager: EntityManager,
  capture: { id: string; sha256: string; bytes: number },
  file: IncomingFile,
  target: UploadTarget,
  actor: Actor,
): Promise<void> {
  const rbw = target.settingChanges.rbwHz?.value;
  const values = [
    capture.id,
    target.labId,
    await nextNumber(manager, target.labId),
    withoutExtension(file.fileName),
    file.fileName,
    file.mediaType,
    capture.bytes,
    capture.sha256,
    actor.personId,
    target.campaignId,
    target.settingChanges,
    typeof rbw === 'number' ? rbw : null,
  ];
  await manager.query(
    `INSERT INTO capture (id, lab_id, number, name, file_name, media_type, bytes, sha256, uploader_id, campaign_id,
       setting_changes, rbw_hz)
     VALUES ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12)`,
    values,
  );
  await manager.query(
    `SELECT graphile_worker.add_job('read-capture', json_build_object('captureId', $1::text), job_key := $1::text, max_attempts := 5)`,
    [capture.id],
  );
  await recordAudit(manager, {
    labId: target.labId,
    personId: actor.personId,
    action: 'capture.uploaded',
    objectId: capture.id,
    detail: { fileName: file.fileName, sha256: capture.sha256, bytes: capture.bytes },
  });
  await announce(manager, {
    kind: 'captureChanged',
    labId: target.labId,
    captureId: capture.id,
    state: 'received',
    progress: null,
  });
}

/**
 * Stores one file as it arrives: bytes, capture and queue job in one transaction, which takes a connection only when the
 * first MiB or the end of the file is there. Never holds more than two pieces in memory.
 * @returns the new capture, or the earlier one of the lab with the same bytes.
 * @throws ProblemError 413 where the file is larger than allowed; whatever ends the stream early. Nothing is left then.
 */
export async function storeFile(
  context: Context,
  gate: Gate,
  actor: Actor,
  file: IncomingFile,
  target: UploadTarget,
): Promise<UploadItem> {
  const incoming = pieces(timed(file.stream, context.config.uploadIdleMs));
  const first = await incoming.next();
  return gate.run(async () => {
    const runner = context.dataSource.createQueryRunner();
    try {
      await runner.startTransaction();
      const id = uuidv7();
      const stored = await storePieces(runner, id, first.done ? null : first.value, incoming);
      if (file.stream.truncated) {
        const mib = (context.config.maxUploadBytes / 1024 / 1024).toLocaleString('en-US', {
          maximumFractionDigits: 2,
        });
        throw tooLarge(`${file.fileName} is larger than ${mib} MiB; export fewer traces or points per file.`);
      }
      await runner.query('SELECT 1 FROM lab WHERE id = $1 FOR UPDATE', [target.labId]);
      const earlier = await earlierCapture(runner.manager, target.labId, stored.sha256);
      if (earlier) {
        await runner.rollbackTransaction();
        return {
          fileName: file.fileName,
          id: earlier.id,
          state: earlier.state,
          duplicate: true,
          error: null,
        };
      }
      await insertCapture(runner.manager, { id, ...stored }, file, target, actor);
      await runner.commitTransaction();
      return { fileName: file.fileName, id, state: 'received', duplicate: false, error: null };
    } catch (error) {
      if (runner.isTransactionActive) await runner.rollbackTransaction().catch(() => {});
      throw error;
    } finally {
      await runner.release();
    }
  });
}
