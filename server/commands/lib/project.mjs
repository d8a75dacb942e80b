import { randomBytes } from 'node:crypto';
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

/** The folder that holds package.json. */
export const projectFolder = dirname(fileURLToPath(new URL('../../../package.json', import.meta.url)));

/** Where the application keeps what must outlive a start: database, secrets, logs. */
export const dataFolder = join(projectFolder, '.data');

/** A reason to stop that a person can act on; shown as a sentence, without a stack. */
export class Refusal extends Error {}

/**
 * Prints one line of progress.
 * @param {string} sentence
 */
export function tell(sentence) {
  console.log(sentence);
}

/**
 * Reads a secret, or makes and keeps one that only this user can read.
 * @param {string} file
 * @returns {string} 48 hexadecimal digits when new.
 */
export function keepSecret(file) {
  if (existsSync(file)) return readFileSync(file, 'utf8').trim();
  mkdirSync(dirname(file), { recursive: true });
  const secret = randomBytes(24).toString('hex');
  writeFileSync(file, `${secret}\n`, { mode: 0o600 });
  chmodSync(file, 0o600);
  return secret;
}

/** @throws {Refusal} where Node is too old. */
export function requireNode() {
  const [major, minor] = process.versions.node.split('.').map(Number);
  if (major < 20 || (major === 20 && minor < 19)) {
    throw new Refusal(`Perhertz needs Node 20.19 or newer; this is ${process.versions.node}.`);
  }
}
