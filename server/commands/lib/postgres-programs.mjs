import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { installDebianPackage } from './debian-packages.mjs';
import { Refusal } from './project.mjs';

/** @import { Ending } from './ending.mjs' */

const DEBIAN_FOLDER = '/usr/lib/postgresql';

/**
 * The folder with initdb, pg_ctl and psql.
 * @param {string | null} major the version that wrote the data; null: the newest that is there.
 * @param {string} [folder]
 * @returns {string | null}
 */
export function findPostgresPrograms(major, folder = DEBIAN_FOLDER) {
  if (!existsSync(folder)) return null;
  const [newest] = readdirSync(folder)
    .filter((version) => major === null || version === major)
    .filter((version) =>
      ['initdb', 'pg_ctl', 'postgres'].every((name) => existsSync(join(folder, version, 'bin', name))),
    )
    .sort((a, b) => Number(b) - Number(a));
  return newest === undefined ? null : join(folder, newest, 'bin');
}

/**
 * Finds PostgreSQL's programs, and installs them where they are missing.
 * @param {Ending} ending
 * @param {string | null} major the version that wrote the data.
 * @returns {Promise<string>}
 */
export async function providePostgresPrograms(ending, major) {
  const found = findPostgresPrograms(major);
  if (found) return found;
  await installDebianPackage(ending, major === null ? 'postgresql' : `postgresql-${major}`, 'PostgreSQL');
  const installed = findPostgresPrograms(major);
  if (installed) return installed;
  throw new Refusal(`PostgreSQL was installed, but its programs are not in ${DEBIAN_FOLDER}.`);
}
