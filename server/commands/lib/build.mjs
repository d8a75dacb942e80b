import { createHash } from 'node:crypto';
import {
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  rmSync,
  statSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { projectFolder, tell } from './project.mjs';
import { runProgram } from './processes.mjs';

/** @import { Ending } from './ending.mjs' */
/** @typedef {{ what: string, output: string, inputs: string[], program: string, args: (output: string) => string[] }} Build */

const dist = join(projectFolder, 'dist');

/** @type {Build} */
const server = {
  what: 'server',
  output: 'node',
  inputs: ['server', 'shared', 'tsconfig.json', 'package-lock.json'],
  program: 'node_modules/typescript/bin/tsc',
  args: (output) => ['-p', 'server/tsconfig.json', '--noCheck', '--outDir', output],
};

/** @type {Build} */
const client = {
  what: 'client',
  output: 'client',
  inputs: ['src', 'shared', 'index.html', 'vite.config.ts', 'package-lock.json'],
  program: 'node_modules/vite/bin/vite.js',
  args: (output) => ['build', '--logLevel', 'warn', '--outDir', output, '--emptyOutDir'],
};

/**
 * @param {string} path
 * @returns {string[]} every file below it that is built.
 */
function filesBelow(path) {
  if (!existsSync(path)) return [];
  if (!statSync(path).isDirectory()) return [path];
  return readdirSync(path, { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !entry.name.endsWith('.mjs'))
    .map((entry) => join(entry.parentPath, entry.name));
}

/**
 * Changes with any source: names, sizes and times of all files that the build reads.
 * @param {Build} build
 */
function fingerprint(build) {
  const hash = createHash('sha256');
  for (const file of build.inputs.flatMap((input) => filesBelow(join(projectFolder, input))).sort()) {
    const { size, mtimeMs } = statSync(file);
    hash.update(`${file} ${size} ${mtimeMs}\n`);
  }
  return hash.digest('hex');
}

/** @param {Build} build */
const stampFile = (build) => join(dist, `${build.output}.built`);

/** @param {Build} build */
function isFresh(build) {
  return (
    existsSync(join(dist, build.output)) &&
    existsSync(stampFile(build)) &&
    readFileSync(stampFile(build), 'utf8') === fingerprint(build)
  );
}

/**
 * Builds beside the old output and swaps at the end, so that an interrupted build leaves nothing half done.
 * @param {Ending} ending
 * @param {Build} build
 */
async function bring(ending, build) {
  if (isFresh(build)) return;
  tell(`Building the ${build.what} …`);
  const stamp = fingerprint(build);
  const fresh = join(dist, `.${build.output}-${process.pid}`);
  const output = join(dist, build.output);
  mkdirSync(dist, { recursive: true });
  const forget = ending.add(() => rmSync(fresh, { recursive: true, force: true }));
  try {
    await runProgram(ending, process.execPath, [join(projectFolder, build.program), ...build.args(fresh)], {
      env: { NODE_ENV: 'production' },
    });
    rmSync(output, { recursive: true, force: true });
    renameSync(fresh, output);
    writeFileSync(stampFile(build), stamp);
  } finally {
    rmSync(fresh, { recursive: true, force: true });
    forget();
  }
}

/** Whether dist/node was made from the server's sources as they are now. */
export const serverBuildIsFresh = () => isFresh(server);

/**
 * Brings dist/node and dist/client up to date, where sources have changed.
 * @param {Ending} ending
 */
export async function buildApplication(ending) {
  await Promise.all([bring(ending, server), bring(ending, client)]);
}
