#!/usr/bin/env node
// Starts the command line in the built form where that is fresh (quick), else from the sources.
import { existsSync } from 'node:fs';
import { fileURLToPath, pathToFileURL } from 'node:url';

const root = new URL('../../', import.meta.url);
if (!existsSync(new URL('node_modules/tsx', root))) {
  console.error(
    `The Node packages are not installed. Run this first: npm ci --prefix ${fileURLToPath(root)}`,
  );
  process.exit(1);
}
const { serverBuildIsFresh } = await import('./lib/build.mjs');
const built = new URL('dist/node/server/commands/estimate-files.js', root);
if (existsSync(built) && serverBuildIsFresh()) {
  await import(built.href);
} else {
  const { register } = await import('tsx/esm/api');
  register();
  await import(pathToFileURL(fileURLToPath(new URL('./estimate-files.ts', import.meta.url))).href);
}
