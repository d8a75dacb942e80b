// Puts samples/ through the upload of a running application, and waits until the worker has read them.
import { createHash } from 'node:crypto';
import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { Client } from 'pg';
import { z } from 'zod';
import { projectFolder } from '../config.ts';
import { uploadSamples } from '../services/upload-samples.ts';

const PATIENCE_MS = 60_000;

const baseUrl = z.url().parse(process.argv[2]);
const folder = join(projectFolder(), 'samples');
const hashes = readdirSync(folder)
  .filter((file) => /\.(csv|txt)$/.test(file))
  .map((file) =>
    createHash('sha256')
      .update(readFileSync(join(folder, file)))
      .digest('hex'),
  );

const database = new Client({ connectionString: z.string().parse(process.env.DATABASE_URL) });
await database.connect();
const count = async (condition: string) => {
  const { rows } = await database.query(
    `SELECT count(DISTINCT sha256)::int AS count FROM capture WHERE sha256 = ANY($1) AND ${condition}`,
    [hashes],
  );
  return z.array(z.object({ count: z.number() })).parse(rows)[0].count;
};
if ((await count('true')) < hashes.length) {
  await uploadSamples(baseUrl, folder);
  const end = Date.now() + PATIENCE_MS;
  while ((await count(`state IN ('received', 'reading')`)) > 0 && Date.now() < end) {
    await new Promise((resolve) => setTimeout(resolve, 100));
  }
}
await database.end();
