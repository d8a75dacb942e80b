import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { LabEvent } from '../../shared/events.ts';
import { createTestApp, until, type TestApp, type Who } from '../support/api.ts';
import { traceCsv } from '../support/trace-csv.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
}, 30_000);
afterAll(() => app.close());

async function follow(who: Who) {
  const ending = new AbortController();
  const response = await (await app.as(who)).call('GET', '/api/events', { signal: ending.signal });
  const events: LabEvent[] = [];
  let open = true;
  const reading = (async () => {
    let text = '';
    const decoder = new TextDecoder();
    for await (const piece of response.body ?? []) {
      text += decoder.decode(piece, { stream: true });
      const messages = text.split('\n\n');
      text = messages.pop() ?? '';
      for (const message of messages) {
        if (message.startsWith('data: ')) events.push(LabEvent.parse(JSON.parse(message.slice(6))));
      }
    }
  })()
    .catch(() => {})
    .finally(() => {
      open = false;
    });
  return {
    response,
    events,
    isOpen: () => open,
    end: async () => {
      ending.abort();
      await reading;
    },
  };
}

describe('events', () => {
  test('tell the lab’s people, and nobody else, how a capture comes along', async () => {
    const [ours, theirs] = await Promise.all([follow('reviewer'), follow('foreigner')]);
    expect(ours.response.headers.get('content-type')).toContain('text/event-stream');
    const [item] = await app.upload('technician', { 'followed.csv': traceCsv() });
    await app.work();
    await until(async () => ours.events.some(({ kind }) => kind === 'estimateMade'), 'the estimate is told');
    await until(
      async () => ours.events.some((event) => event.kind === 'captureChanged' && event.state === 'ready'),
      'the end is told',
    );
    const states = ours.events.flatMap((event) => (event.kind === 'captureChanged' ? [event.state] : []));
    expect([...new Set(states)]).toEqual(['received', 'reading', 'ready']);
    expect(states.at(-1)).toBe('ready');
    expect(ours.events.every((event) => event.captureId === item.id)).toBe(true);
    expect(theirs.events).toEqual([]);
    await Promise.all([ours.end(), theirs.end()]);
  });

  test('end when the event connection is lost, so that nobody waits for what was missed, and come again', async () => {
    const stream = await follow('engineer');
    await app.sql(
      `SELECT pg_terminate_backend(pid) FROM pg_stat_activity
       WHERE datname = current_database() AND application_name = 'perhertz-events'`,
    );
    await until(async () => !stream.isOpen(), 'the stream ends');
    await until(async () => app.context.events.listening, 'the connection is back');
    const again = await follow('engineer');
    await app.upload('technician', { 'after.csv': traceCsv({ seed: 2 }) });
    await until(async () => again.events.length > 0, 'an event arrives');
    await again.end();
  });
});
