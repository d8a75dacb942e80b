import { writeFileSync } from 'node:fs';
import { madeFiles } from './scenario.ts';

for (const [name, bytes] of madeFiles()) {
  writeFileSync(new URL(name, import.meta.url), bytes);
  console.log(`${name}  ${bytes.length} bytes`);
}
