// Brings the schema up to date and, with --demo, puts the demo's labs and people in place.
import { z } from 'zod';
import { createDataSource } from '../database.ts';
import { migrate } from '../migrate.ts';
import { seedDemo } from '../services/seed-demo.ts';

const databaseUrl = z.string().parse(process.env.DATABASE_URL);
await migrate(databaseUrl);
if (process.argv.includes('--demo')) {
  const dataSource = await createDataSource(databaseUrl, 2).initialize();
  await seedDemo(dataSource, { production: process.env.NODE_ENV === 'production' });
  await dataSource.destroy();
}
