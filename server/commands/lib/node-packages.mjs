import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { projectFolder, Refusal, tell } from './project.mjs';
import { runProgram } from './processes.mjs';

/** @import { Ending } from './ending.mjs' */

/**
 * Whether node_modules holds every package at the version that the lock file names; packages for other systems may be
 * absent. npm writes its own list last, so that an interrupted installation has none.
 * @param {string} [folder]
 */
export function packagesAreInstalled(folder = projectFolder) {
  const listFile = join(folder, 'node_modules', '.package-lock.json');
  if (!existsSync(listFile)) return false;
  const wanted = JSON.parse(readFileSync(join(folder, 'package-lock.json'), 'utf8')).packages;
  const installed = JSON.parse(readFileSync(listFile, 'utf8')).packages;
  return Object.entries(wanted).every(
    ([path, entry]) =>
      path === '' ||
      installed[path]?.version === entry.version ||
      (installed[path] === undefined && entry.optional === true),
  );
}

/**
 * Installs what package-lock.json names, where that isn't there yet.
 * @param {Ending} ending
 */
export async function installNodePackages(ending) {
  if (packagesAreInstalled()) return;
  tell('Installing Node packages (a minute or so) …');
  const npm = process.env.npm_execpath;
  const [program, ...first] = npm && /npm-cli\.js$/.test(npm) ? [process.execPath, npm] : ['npm'];
  try {
    await runProgram(ending, program, [...first, 'ci', '--include=dev', '--no-audit', '--no-fund']);
  } catch (error) {
    throw new Refusal(
      `The Node packages couldn’t be installed. Run \`npm ci\` to see why.\n${error instanceof Error ? error.message : ''}`,
    );
  }
}
