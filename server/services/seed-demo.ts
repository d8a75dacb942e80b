import type { DataSource } from 'typeorm';
import { v7 as uuidv7 } from 'uuid';
import type { Role } from '../../shared/session.ts';
import { hashPassword } from './passwords.ts';

export const DEMO_PASSWORD = 'quiet-floor-demo';

interface DemoLab {
  name: string;
  prefix: string;
  /** Captures were numbered up to here before the demo begins. */
  nextNumber: number;
  people: { email: string; name: string; role: Role }[];
  campaigns: { name: string; limitDbmPerHz: number | null }[];
}

export const DEMO_LABS: DemoLab[] = [
  {
    name: 'Harbour Bench',
    prefix: 'HB',
    nextNumber: 371,
    people: [
      { email: 'technician@harbourbench.example', name: 'Tobias Fennimarsh', role: 'technician' },
      { email: 'engineer@harbourbench.example', name: 'Mara Quillstead', role: 'engineer' },
      { email: 'reviewer@harbourbench.example', name: 'Ilse Brandmoor', role: 'reviewer' },
      { email: 'admin@harbourbench.example', name: 'Nadia Orlemont', role: 'administrator' },
    ],
    campaigns: [
      { name: '70 MHz IF strip, lot 3', limitDbmPerHz: -145.5 },
      { name: '70 MHz IF strip, lot 4', limitDbmPerHz: -145.5 },
      { name: 'Bench supply survey', limitDbmPerHz: null },
      { name: 'Analyser housekeeping', limitDbmPerHz: null },
    ],
  },
  {
    name: 'Tallow Reach Metrology',
    prefix: 'TR',
    nextNumber: 1,
    people: [{ email: 'engineer@tallowreach.example', name: 'Odile Warrenby', role: 'engineer' }],
    campaigns: [{ name: 'Reference amplifiers', limitDbmPerHz: null }],
  },
];

/**
 * Puts the demo's labs, people and campaigns in place; what is there already stays as it is.
 * @throws Error in production, where demo accounts must never exist.
 */
export async function seedDemo(
  dataSource: DataSource,
  { production }: { production: boolean },
): Promise<void> {
  if (production) throw new Error('The demo is never seeded where NODE_ENV is production.');
  const passwordHash = await hashPassword(DEMO_PASSWORD);
  await dataSource.transaction(async (manager) => {
    for (const lab of DEMO_LABS) {
      await manager.query(
        `INSERT INTO lab (id, name, capture_number_prefix, next_capture_number) VALUES ($1, $2, $3, $4)
         ON CONFLICT (name) DO NOTHING`,
        [uuidv7(), lab.name, lab.prefix, lab.nextNumber],
      );
      for (const person of lab.people) {
        await manager.query(
          `INSERT INTO person (id, email, name, password_hash) VALUES ($1, $2, $3, $4) ON CONFLICT (email) DO NOTHING`,
          [uuidv7(), person.email, person.name, passwordHash],
        );
        await manager.query(
          `INSERT INTO membership (lab_id, person_id, role)
           SELECT lab.id, person.id, $3 FROM lab, person WHERE lab.name = $1 AND person.email = $2
           ON CONFLICT DO NOTHING`,
          [lab.name, person.email, person.role],
        );
      }
      for (const campaign of lab.campaigns) {
        await manager.query(
          `INSERT INTO campaign (id, lab_id, name, limit_dbm_per_hz)
           SELECT $1, lab.id, $3, $4 FROM lab WHERE lab.name = $2 ON CONFLICT (lab_id, name) DO NOTHING`,
          [uuidv7(), lab.name, campaign.name, campaign.limitDbmPerHz],
        );
      }
    }
  });
}
