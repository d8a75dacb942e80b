import { spawnSync } from 'node:child_process';
import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { basename, dirname, join } from 'node:path';
import { Refusal, tell } from './project.mjs';

/** @import { SystemUser } from './processes.mjs' */

const ELSEWHERE = '/var/lib/perhertz';

/** @returns {SystemUser} */
function postgresUser() {
  const line = readFileSync('/etc/passwd', 'utf8')
    .split('\n')
    .find((line) => line.startsWith('postgres:'));
  if (!line) throw new Refusal('PostgreSQL won’t run as root, and there is no system user “postgres”.');
  const [, , uid, gid] = line.split(':').map(Number);
  return { uid, gid };
}

/**
 * Whom PostgreSQL runs as: its programs refuse root, so that root hands over to the user who owns the data, or to
 * Debian's `postgres` for new data.
 * @param {string | null} folder the data, where they exist.
 * @returns {SystemUser | null} null: the user who runs this command.
 */
export function clusterOwner(folder) {
  const us = process.getuid?.() ?? 0;
  const owner = folder !== null && existsSync(folder) ? statSync(folder) : null;
  if (us !== 0) {
    if (owner && owner.uid !== us) {
      throw new Refusal(
        `The database in ${folder} belongs to another user. Start Perhertz as that user or as root.`,
      );
    }
    return null;
  }
  return owner && owner.uid !== 0 ? { uid: owner.uid, gid: owner.gid } : postgresUser();
}

/**
 * Where the cluster's data are. New data go beside the other state, save where the database's user can't get there.
 * @param {string} stateFolder
 * @param {SystemUser | null} user
 * @returns {string | null} null with no user: nothing was chosen before.
 */
export function chooseClusterFolder(stateFolder, user) {
  const note = join(stateFolder, 'database-folder');
  if (existsSync(note)) return readFileSync(note, 'utf8').trim();
  const beside = join(stateFolder, 'postgres');
  if (existsSync(beside)) return beside;
  if (process.getuid?.() !== 0) return beside;
  if (user === null) return null;
  if (spawnSync('test', ['-x', stateFolder], { cwd: '/', ...user }).status === 0) return beside;
  const name = `${basename(dirname(stateFolder))}-${randomBytes(4).toString('hex')}`;
  const folder = join(ELSEWHERE, name);
  mkdirSync(ELSEWHERE, { recursive: true, mode: 0o755 });
  tell(`PostgreSQL’s user can’t reach ${stateFolder}, so the database lives in ${folder}.`);
  writeFileSync(note, `${folder}\n`);
  return folder;
}
