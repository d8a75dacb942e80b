import { spawnSync } from 'node:child_process';
import { Refusal, tell } from './project.mjs';
import { runProgram } from './processes.mjs';

/** @import { Ending } from './ending.mjs' */

const CLUSTER_RULE = '/etc/postgresql-common/createcluster.d/perhertz.conf';

/** @returns {'root' | 'sudo' | 'none'} how this user may install packages. */
function rights() {
  if (process.getuid?.() === 0) return 'root';
  return spawnSync('sudo', ['-n', 'true'], { stdio: 'ignore' }).status === 0 ? 'sudo' : 'none';
}

/**
 * What a person with the rights has to type.
 * @param {string} name
 */
export function installCommand(name) {
  const script = `apt-get update && apt-get install -y --no-install-recommends ${name}`;
  const sudo = spawnSync('sudo', ['-V'], { stdio: 'ignore' }).status === 0;
  return sudo ? `sudo sh -c '${script}'` : `su -c '${script}'`;
}

/**
 * Installs one of Debian's packages, as root or through sudo where that needs no password. While PostgreSQL is being
 * installed a rule keeps Debian from making and starting a cluster of its own.
 * @param {Ending} ending
 * @param {string} name
 * @param {string} what how people call it.
 * @throws {Refusal} that names the command to run, where the rights are missing or it fails.
 */
export async function installDebianPackage(ending, name, what) {
  const how = rights();
  if (how === 'none') {
    throw new Refusal(
      `${what} is missing, and this user may not install it. Run this command, then try again:\n\n  ${installCommand(name)}\n`,
    );
  }
  tell(`Installing ${what} from Debian’s package “${name}” …`);
  const script = [
    'set -e',
    'export DEBIAN_FRONTEND=noninteractive',
    `if [ ! -e ${CLUSTER_RULE} ]; then mkdir -p $(dirname ${CLUSTER_RULE}); echo "create_main_cluster = false" > ${CLUSTER_RULE}; trap "rm -f ${CLUSTER_RULE}" EXIT; fi`,
    'apt-get update -q',
    `apt-get install -q -y --no-install-recommends -o DPkg::Lock::Timeout=120 ${name}`,
  ].join('\n');
  const [program, ...args] = how === 'root' ? ['sh', '-c', script] : ['sudo', '-n', 'sh', '-c', script];
  try {
    await runProgram(ending, program, args, { cwd: '/', patient: true });
  } catch (error) {
    throw new Refusal(
      `${what} couldn’t be installed. Run this command to see why:\n\n  ${installCommand(name)}\n\n${error instanceof Error ? error.message : ''}`,
    );
  }
}
