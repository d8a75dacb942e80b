import { z } from 'zod';

const Coded = z.object({ code: z.string() });
const Worded = z.object({ message: z.string() });

/** Node's and PostgreSQL's codes for a server that is away, starting or going down. */
const AWAY = /^(ECONNREFUSED|ECONNRESET|ENOENT|ETIMEDOUT|EPIPE|57P0[1-3]|08...|53300)$/;
const AWAY_WORDS =
  /Connection terminated|connection timeout|timeout exceeded when trying to connect|client was closed|not queryable/i;

/** Whether an error says that the database can't be reached, rather than that something was wrong with a request. */
export function isDatabaseAway(error: unknown): boolean {
  const coded = Coded.safeParse(error);
  if (coded.success && AWAY.test(coded.data.code)) return true;
  const worded = Worded.safeParse(error);
  return worded.success && AWAY_WORDS.test(worded.data.message);
}
