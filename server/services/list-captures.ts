import type { DataSource, SelectQueryBuilder } from 'typeorm';
import { z } from 'zod';
import type { CaptureQuery, CaptureSort } from '../../shared/capture.ts';
import { CaptureEntity, type Capture } from '../entities/capture.ts';
import { invalid } from './problems.ts';

/** Each order as an SQL key that is never null, its direction, and the key's type for the cursor. */
const ORDERS: Record<
  CaptureSort,
  { key: string | null; direction: 'ASC' | 'DESC'; type: 'text' | 'float8' }
> = {
  newest: { key: null, direction: 'DESC', type: 'text' },
  oldest: { key: null, direction: 'ASC', type: 'text' },
  name: { key: 'lower(capture.name)', direction: 'ASC', type: 'text' },
  density: { key: "coalesce(estimate.dbm_per_hz, 'Infinity'::float8)", direction: 'ASC', type: 'float8' },
  state: { key: "coalesce(capture.state, '')", direction: 'ASC', type: 'text' },
};

const Cursor = z.tuple([z.string(), z.union([z.string(), z.number(), z.null()]), z.uuid()]);

function decodeCursor(text: string, sort: CaptureSort): { key: string | number | null; id: string } {
  try {
    const [cursorSort, key, id] = Cursor.parse(JSON.parse(Buffer.from(text, 'base64url').toString('utf8')));
    if (cursorSort === sort) return { key, id };
  } catch {
    // told below
  }
  throw invalid('The cursor can’t be used; ask for the first page without one.', [
    { path: 'cursor', message: 'isn’t one of this list in this order' },
  ]);
}

const encodeCursor = (sort: CaptureSort, key: string | number | null, id: string) =>
  Buffer.from(JSON.stringify([sort, key, id])).toString('base64url');

function filtered(dataSource: DataSource, labId: string, query: CaptureQuery): SelectQueryBuilder<Capture> {
  const builder = dataSource
    .getRepository(CaptureEntity)
    .createQueryBuilder('capture')
    .innerJoinAndSelect('capture.uploader', 'uploader')
    .leftJoinAndSelect('capture.campaign', 'campaign')
    .leftJoinAndSelect('capture.latestEstimate', 'estimate')
    .leftJoinAndSelect('estimate.author', 'author')
    .where('capture.lab_id = :labId', { labId });
  if (query.search) {
    const pattern = `%${query.search.replace(/[\\%_]/g, '\\$&')}%`;
    builder.andWhere(
      '(capture.name ILIKE :pattern OR capture.file_name ILIKE :pattern OR capture.number ILIKE :pattern OR uploader.name ILIKE :pattern)',
      { pattern },
    );
  }
  if (query.state) builder.andWhere('capture.state = :state', { state: query.state });
  if (query.verdict) builder.andWhere('estimate.verdict = :verdict', { verdict: query.verdict });
  if (query.campaignId)
    builder.andWhere('capture.campaign_id = :campaignId', { campaignId: query.campaignId });
  if (query.personId) builder.andWhere('capture.uploader_id = :personId', { personId: query.personId });
  if (query.since) builder.andWhere('capture.created_at >= :since', { since: query.since });
  return builder;
}

/**
 * One page of a lab's captures in a stable order, by keyset: rows that arrive while somebody pages don't shift it.
 * @returns the rows, the cursor of the next page (null on the last) and, on the first page, how many there are in all.
 * @throws ProblemError 400 where the cursor isn't one of this list.
 */
export async function listCaptures(
  dataSource: DataSource,
  labId: string,
  query: CaptureQuery,
): Promise<{ captures: Capture[]; nextCursor: string | null; total?: number }> {
  const { key, direction, type } = ORDERS[query.sort];
  const total = query.cursor === undefined ? await filtered(dataSource, labId, query).getCount() : undefined;
  const builder = filtered(dataSource, labId, query).limit(query.limit + 1);
  if (key !== null) builder.addSelect(key, 'sort_key').orderBy('sort_key', direction);
  builder.addOrderBy('capture.id', direction);
  if (query.cursor !== undefined) {
    const after = decodeCursor(query.cursor, query.sort);
    const compare = direction === 'ASC' ? '>' : '<';
    if (key === null) builder.andWhere(`capture.id ${compare} :afterId`, { afterId: after.id });
    else {
      builder.andWhere(
        `(${key}, capture.id) ${compare} (CAST(:afterKey AS ${type}), CAST(:afterId AS uuid))`,
        {
          afterKey: after.key ?? 'Infinity',
          afterId: after.id,
        },
      );
    }
  }
  const { entities, raw } = await builder.getRawAndEntities<{ sort_key?: string | number }>();
  const captures = entities.slice(0, query.limit);
  const last = captures.at(-1);
  if (entities.length <= query.limit || !last) return { captures, nextCursor: null, total };
  const sortKey = raw[query.limit - 1]?.sort_key ?? null;
  const finiteKey = typeof sortKey === 'number' && !Number.isFinite(sortKey) ? null : sortKey;
  return { captures, nextCursor: encodeCursor(query.sort, finiteKey, last.id), total };
}
