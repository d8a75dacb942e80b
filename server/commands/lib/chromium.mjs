import { existsSync } from 'node:fs';
import { installDebianPackage } from './debian-packages.mjs';

/** @import { Ending } from './ending.mjs' */

const DEBIAN_PROGRAM = '/usr/bin/chromium';

/**
 * Finds Debian's Chromium, and installs it where it is missing.
 * @param {Ending} ending
 * @returns {Promise<string>} the program; PERHERTZ_CHROMIUM names another one.
 */
export async function provideChromium(ending) {
  const program = process.env.PERHERTZ_CHROMIUM ?? DEBIAN_PROGRAM;
  if (!existsSync(program)) await installDebianPackage(ending, 'chromium', 'Chromium');
  return program;
}
