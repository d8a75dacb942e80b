import { useQueryClient, type InfiniteData, type QueryClient } from '@tanstack/react-query';
import { useEffect } from 'react';
import { LabEvent } from '../../shared/events.ts';
import { Session } from '../../shared/session.ts';
import { captureKeys, captureOptions, type CapturePage } from './captures.ts';
import { campaignKeys } from './campaigns.ts';
import { NetworkFailure, request, safeJson } from './http.ts';

type Listener = (event: LabEvent) => void;
const listeners = new Set<Listener>();

/** Calls `listener` for each event of the labs until the returned function is called. */
export function listenToEvents(listener: Listener): () => void {
  listeners.add(listener);
  return () => listeners.delete(listener);
}

function patchRow(client: QueryClient, event: Extract<LabEvent, { kind: 'captureChanged' }>): void {
  client.setQueriesData<InfiniteData<CapturePage, string>>({ queryKey: captureKeys.lists }, (data) =>
    data === undefined
      ? data
      : {
          ...data,
          pages: data.pages.map((page) => ({
            ...page,
            items: page.items.map((item) =>
              item.id === event.captureId ? { ...item, state: event.state, progress: event.progress } : item,
            ),
          })),
        },
  );
}

function isListed(client: QueryClient, captureId: string): boolean {
  return client
    .getQueriesData<InfiniteData<CapturePage, string>>({ queryKey: captureKeys.lists })
    .some(([, data]) => data?.pages.some(({ items }) => items.some(({ id }) => id === captureId)) ?? false);
}

const refresh = { wanted: false, running: false };

/** Asks for the lists again, one request at a time however many events come; the last event is always covered. */
async function refreshLists(client: QueryClient): Promise<void> {
  refresh.wanted = true;
  if (refresh.running) return;
  refresh.running = true;
  while (refresh.wanted) {
    await new Promise((resolve) => setTimeout(resolve, 40));
    refresh.wanted = false;
    await Promise.allSettled([
      client.invalidateQueries({ queryKey: captureKeys.lists }),
      client.invalidateQueries({ queryKey: campaignKeys.all }),
    ]);
  }
  refresh.running = false;
}

function apply(client: QueryClient, event: LabEvent): void {
  if (event.kind === 'captureChanged') patchRow(client, event);
  const settled =
    event.kind === 'estimateMade' ||
    (event.state !== 'reading' && event.progress === null) ||
    !isListed(client, event.captureId);
  if (settled) void refreshLists(client);
  if (settled || event.kind === 'captureChanged') {
    void client.invalidateQueries({ queryKey: captureOptions(event.captureId).queryKey });
  }
  for (const listener of listeners) listener(event);
}

/** Follows `GET /api/events` while mounted: patches and refreshes what is on screen. Mount once. */
export function useLabEvents(): void {
  const client = useQueryClient();
  useEffect(() => {
    let source: EventSource;
    let broken = false;
    let stopped = false;
    let retry: ReturnType<typeof setTimeout> | undefined;
    const open = () => {
      source = new EventSource('/api/events');
      source.onopen = () => {
        if (broken) void client.invalidateQueries({ queryKey: captureKeys.all });
        broken = false;
      };
      source.onmessage = ({ data }) => {
        const event = LabEvent.safeParse(safeJson(String(data)));
        if (event.success) apply(client, event.data);
      };
      source.onerror = () => {
        broken = true;
        if (source.readyState === EventSource.CLOSED) retry = setTimeout(() => void reopen(), 5_000);
      };
    };
    /** A refused stream may mean that the session has run out: asking for it brings the sign-in dialog. */
    const reopen = async () => {
      try {
        await request(Session, '/api/session');
      } catch (error) {
        if (!stopped && error instanceof NetworkFailure) retry = setTimeout(() => void reopen(), 5_000);
        return;
      }
      if (!stopped) open();
    };
    open();
    return () => {
      stopped = true;
      clearTimeout(retry);
      source.close();
    };
  }, [client]);
}
