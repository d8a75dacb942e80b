import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { TestProject } from 'vitest/node';
import { startApplication } from '../../server/commands/lib/application.mjs';
import { buildApplication } from '../../server/commands/lib/build.mjs';
import { Ending } from '../../server/commands/lib/ending.mjs';
import { freePort } from '../../server/commands/lib/ports.mjs';
import { createTestDatabase } from './database.ts';

declare module 'vitest' {
  export interface ProvidedContext {
    baseUrl: string;
  }
}

/** Global set-up of the browser tests: the built application, web and worker, on a database of its own with the demo in it. */
export default async function serveApplication(project: TestProject): Promise<() => Promise<void>> {
  const ending = new Ending();
  try {
    await buildApplication(ending);
    const database = await createTestDatabase();
    ending.add(database.drop);
    const logFolder = mkdtempSync(join(tmpdir(), 'perhertz-log-'));
    ending.add(() => rmSync(logFolder, { recursive: true, force: true }));
    const baseUrl = await startApplication(ending, {
      databaseUrl: database.url,
      sessionSecret: 'a secret for the tests alone',
      host: '127.0.0.1',
      port: await freePort(),
      demo: true,
      fromSource: false,
      logFolder,
      tell: console.log,
    });
    project.provide('baseUrl', baseUrl);
  } catch (error) {
    await ending.run();
    throw error;
  }
  return () => ending.run();
}
