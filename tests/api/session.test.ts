import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { NewToken, Session } from '../../shared/session.ts';
import { Problem } from '../../shared/problem.ts';
import { Caller, createTestApp, EMAILS, type TestApp, cookiesOf } from '../support/api.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
});
afterAll(() => app.close());

const signIn = (email: string, password: string, headers: Record<string, string> = {}) =>
  app.nobody.call('POST', '/api/session', { json: { email, password }, headers });

describe('signing in', () => {
  test('answers who I am and my labs, whatever the case of the address', async () => {
    const response = await signIn('Engineer@HarbourBench.example', 'quiet-floor-demo');
    expect(response.status).toBe(200);
    const session = Session.parse(await response.json());
    expect(session.person.name).toBe('Mara Quillstead');
    expect(session.labs.map(({ name, role }) => [name, role])).toEqual([['Harbour Bench', 'engineer']]);
  });

  test('sets a cookie that scripts and other sites don’t get', async () => {
    const cookies = (await signIn(EMAILS.engineer, 'quiet-floor-demo')).headers.getSetCookie();
    const cookie = cookies.find((text) => text.startsWith('perhertz='));
    expect(cookie).toMatch(/^perhertz=/);
    expect(cookie).toMatch(/; HttpOnly/);
    expect(cookie).toMatch(/; SameSite=Lax/);
    expect(cookie).toMatch(/; Path=\//);
    expect(cookie).not.toMatch(/Domain=/);
  });

  test('gives a new session each time', async () => {
    const first = cookiesOf(await signIn(EMAILS.engineer, 'quiet-floor-demo'));
    const again = await signIn(EMAILS.engineer, 'quiet-floor-demo', { Cookie: first });
    expect(cookiesOf(again)).not.toBe(first);
    const old = await new Caller(app.baseUrl, { Cookie: first }).call('GET', '/api/session');
    expect(old.status).toBe(401);
  });

  test('refuses a wrong password and an unknown address with the same words', async () => {
    const wrong = await signIn(EMAILS.reviewer, 'loud-floor');
    const unknown = await signIn('nobody@harbourbench.example', 'loud-floor');
    expect([wrong.status, unknown.status]).toEqual([401, 401]);
    const [first, second] = [Problem.parse(await wrong.json()), Problem.parse(await unknown.json())];
    expect(first.detail).toBe(second.detail);
    expect(first.detail).toContain('9 tries are left');
    expect(wrong.headers.get('content-type')).toContain('application/problem+json');
  });

  test('stops after ten failures, the right password included, and says when to try again', async () => {
    const email = EMAILS.technician;
    for (let failure = 0; failure < 10; failure += 1) expect((await signIn(email, 'no')).status).toBe(401);
    const stopped = await signIn(email, 'quiet-floor-demo');
    expect(stopped.status).toBe(429);
    expect(Number(stopped.headers.get('retry-after'))).toBeGreaterThan(600);
    await app.sql('DELETE FROM rate_limit');
    expect((await signIn(email, 'quiet-floor-demo')).status).toBe(200);
  }, 20_000);

  test('refuses a disabled person, in a session that is open too', async () => {
    const cookie = cookiesOf(await signIn(EMAILS.administrator, 'quiet-floor-demo'));
    const open = new Caller(app.baseUrl, { Cookie: cookie });
    expect((await open.call('GET', '/api/session')).status).toBe(200);
    await app.sql('UPDATE person SET disabled_at = now() WHERE email = $1', [EMAILS.administrator]);
    expect((await open.call('GET', '/api/session')).status).toBe(401);
    expect((await signIn(EMAILS.administrator, 'quiet-floor-demo')).status).toBe(401);
    await app.sql('UPDATE person SET disabled_at = NULL');
  });

  test('ends a session after seven days, however busy it was', async () => {
    const cookie = cookiesOf(await signIn(EMAILS.engineer, 'quiet-floor-demo'));
    const caller = new Caller(app.baseUrl, { Cookie: cookie });
    expect((await caller.call('GET', '/api/session')).status).toBe(200);
    await app.sql(
      `UPDATE session SET sess = (sess::jsonb || jsonb_build_object('signedInAt',
         (sess->>'signedInAt')::float8 - 7 * 24 * 3600 * 1000.0))::json WHERE sess->>'signedInAt' IS NOT NULL`,
    );
    expect((await caller.call('GET', '/api/session')).status).toBe(401);
  });

  test('ends with signing out', async () => {
    const cookie = cookiesOf(await signIn(EMAILS.engineer, 'quiet-floor-demo'));
    const caller = new Caller(app.baseUrl, { Cookie: cookie });
    expect((await caller.call('DELETE', '/api/session')).status).toBe(204);
    expect((await caller.call('GET', '/api/session')).status).toBe(401);
  });
});

describe('other sites', () => {
  test.each([
    [{ Origin: 'https://elsewhere.example' }],
    [{ Origin: 'null' }],
    [{ 'Sec-Fetch-Site': 'cross-site' }],
    [{ 'Sec-Fetch-Site': 'same-site' }],
  ])('can’t send unsafe requests: %o', async (headers) => {
    const engineer = await app.as('engineer');
    expect((await engineer.call('DELETE', '/api/session', { headers })).status).toBe(403);
    expect((await engineer.call('GET', '/api/session')).status).toBe(200);
  });

  test('are told from our own pages', async () => {
    const response = await signIn(EMAILS.engineer, 'quiet-floor-demo', {
      Origin: app.baseUrl,
      'Sec-Fetch-Site': 'same-origin',
    });
    expect(response.status).toBe(200);
  });
});

describe('tokens', () => {
  test('work on every call in their lab until they’re revoked', async () => {
    const engineer = await app.as('engineer');
    const labId = await app.labOf('engineer');
    const made = await engineer.json(NewToken, 'POST', '/api/tokens', {
      json: { name: 'bench', labId },
      status: 201,
    });
    const script = new Caller(app.baseUrl, { Authorization: `Bearer ${made.token}` });
    expect((await script.get(Session, '/api/session')).labs).toHaveLength(1);
    expect((await script.call('GET', `/api/labs/${labId}/captures`)).status).toBe(200);
    const list = await engineer.call('GET', '/api/tokens');
    expect(await list.text()).not.toContain(made.token);
    expect((await engineer.call('DELETE', `/api/tokens/${made.id}`)).status).toBe(204);
    expect((await script.call('GET', '/api/session')).status).toBe(401);
  });

  test('are stored as hashes alone', async () => {
    const labId = await app.labOf('engineer');
    const made = await (
      await app.as('engineer')
    ).json(NewToken, 'POST', '/api/tokens', { json: { name: 'hash', labId }, status: 201 });
    const rows = await app.sql<{ row: string }>('SELECT row_to_json(token)::text AS row FROM token');
    expect(rows.length).toBeGreaterThan(0);
    expect(rows.every(({ row }) => !row.includes(made.token))).toBe(true);
  });

  test('see one lab even where the person has two, and make no tokens', async () => {
    const [foreignLab] = await app.sql<{ id: string }>("SELECT id FROM lab WHERE name LIKE 'Tallow%'");
    const engineer = await app.as('engineer');
    const labId = await app.labOf('engineer');
    const made = await engineer.json(NewToken, 'POST', '/api/tokens', {
      json: { name: 'one', labId },
      status: 201,
    });
    await app.sql(
      `INSERT INTO membership (lab_id, person_id, role) SELECT $1, id, 'engineer' FROM person WHERE email = $2`,
      [foreignLab.id, EMAILS.engineer],
    );
    expect((await engineer.get(Session, '/api/session')).labs).toHaveLength(2);
    const script = new Caller(app.baseUrl, { Authorization: `Bearer ${made.token}` });
    expect((await script.get(Session, '/api/session')).labs.map(({ id }) => id)).toEqual([labId]);
    expect((await script.call('GET', `/api/labs/${foreignLab.id}/captures`)).status).toBe(404);
    expect((await script.call('POST', '/api/tokens', { json: { name: 'more', labId } })).status).toBe(403);
    await app.sql(
      'DELETE FROM membership WHERE lab_id = $1 AND person_id = (SELECT id FROM person WHERE email = $2)',
      [foreignLab.id, EMAILS.engineer],
    );
  });

  test('refuse what isn’t one', async () => {
    const script = new Caller(app.baseUrl, { Authorization: 'Bearer perhertz_nonsense' });
    expect((await script.call('GET', '/api/session')).status).toBe(401);
  });
});
