import { existsSync, readFileSync, readdirSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import { z } from 'zod';
import { Campaign, UploadItem } from '../../shared/capture.ts';
import { page } from '../../shared/problem.ts';
import { Session } from '../../shared/session.ts';
import { DEMO_LABS, DEMO_PASSWORD } from './seed-demo.ts';

const Sample = z.object({
  file: z.string(),
  name: z.string(),
  campaign: z.string().optional(),
  /** What people set on top of the file. */
  settings: z.record(z.string(), z.unknown()).optional(),
  /** Address, or its part before the @ in the first lab. */
  uploader: z.string(),
});
type Sample = z.infer<typeof Sample>;

function readSamples(folder: string): Sample[] {
  const list = join(folder, 'samples.json');
  if (existsSync(list)) return z.array(Sample).parse(JSON.parse(readFileSync(list, 'utf8')));
  return readdirSync(folder)
    .filter((file) => /\.(csv|txt)$/.test(file))
    .sort()
    .map((file) => ({ file, name: file, uploader: 'engineer' }));
}

/** One person at the API, signed in with a session cookie. */
class SignedIn {
  readonly #baseUrl: string;
  readonly #cookie: string;
  readonly labId: string;

  private constructor(baseUrl: string, cookie: string, labId: string) {
    this.#baseUrl = baseUrl;
    this.#cookie = cookie;
    this.labId = labId;
  }

  static async as(baseUrl: string, email: string): Promise<SignedIn> {
    const response = await fetch(`${baseUrl}/api/session`, {
      method: 'POST',
      headers: { 'Content-Type': 'application/json' },
      body: JSON.stringify({ email, password: DEMO_PASSWORD }),
    });
    if (!response.ok) throw new Error(`${email} can’t sign in to add samples: ${await response.text()}`);
    const cookie = response.headers
      .getSetCookie()
      .map((set) => set.split(';')[0])
      .join('; ');
    const { labs } = Session.parse(await response.json());
    const [lab] = labs;
    if (!lab) throw new Error(`${email} is in no lab, so no samples can be added.`);
    return new SignedIn(baseUrl, cookie, lab.id);
  }

  async call(method: string, path: string, body?: string | FormData): Promise<unknown> {
    const headers = new Headers({ Cookie: this.#cookie });
    if (typeof body === 'string') headers.set('Content-Type', 'application/json');
    const response = await fetch(`${this.#baseUrl}${path}`, { method, headers, body });
    if (!response.ok)
      throw new Error(`${method} ${path} was answered ${response.status}: ${await response.text()}`);
    return response.status === 204 ? null : response.json();
  }
}

async function campaignId(person: SignedIn, name: string): Promise<string> {
  const path = `/api/labs/${person.labId}/campaigns`;
  const { items } = page(Campaign).parse(await person.call('GET', path));
  const known = items.find((campaign) => campaign.name === name);
  return known?.id ?? Campaign.parse(await person.call('POST', path, JSON.stringify({ name }))).id;
}

async function uploadSample(person: SignedIn, folder: string, sample: Sample): Promise<boolean> {
  const form = new FormData();
  if (sample.campaign) form.append('campaignId', await campaignId(person, sample.campaign));
  if (sample.settings) form.append('settings', JSON.stringify(sample.settings));
  form.append(
    'files',
    new Blob([await readFile(join(folder, sample.file))], { type: 'text/csv' }),
    sample.file,
  );
  const answer = await person.call('POST', `/api/labs/${person.labId}/captures`, form);
  const { items } = z.object({ items: z.array(UploadItem) }).parse(answer);
  const [item] = items;
  if (!item?.id) throw new Error(`The sample ${sample.file} wasn’t taken: ${item?.error}`);
  if (!item.duplicate)
    await person.call('PATCH', `/api/captures/${item.id}`, JSON.stringify({ name: sample.name }));
  return !item.duplicate;
}

/**
 * Puts a folder's sample files through the real upload path, as the demo's people. Samples that are there already stay
 * as they are.
 * @param baseUrl where the application serves, such as `http://127.0.0.1:4173`.
 * @returns how many captures are new.
 */
export async function uploadSamples(baseUrl: string, folder: string): Promise<number> {
  const domain = DEMO_LABS[0].people[0].email.split('@')[1];
  const people = new Map<string, SignedIn>();
  let added = 0;
  for (const sample of readSamples(folder)) {
    const email = sample.uploader.includes('@') ? sample.uploader : `${sample.uploader}@${domain}`;
    const person = people.get(email) ?? (await SignedIn.as(baseUrl, email));
    people.set(email, person);
    if (await uploadSample(person, folder, sample)) added += 1;
  }
  return added;
}
