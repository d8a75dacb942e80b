import { useSyncExternalStore } from 'react';
import { z } from 'zod';
import { UploadItem } from '../../shared/capture.ts';
import { recoverSession, safeJson, toProblem } from './http.ts';

const AT_ONCE = 3;
export const MAX_FILE_BYTES = 256 * 1024 * 1024;

/** `stored`: the server has it and it is being read. `lost`: the connection dropped; it can be sent again. */
export type UploadPhase = 'waiting' | 'sending' | 'stored' | 'duplicate' | 'refused' | 'lost';

export interface Upload {
  id: string;
  labId: string;
  campaignId: string | null;
  file: File;
  phase: UploadPhase;
  sentBytes: number;
  startedAt: number;
  /** The new capture, or the earlier one where the same bytes were already here. */
  captureId: string | null;
  error: string | null;
}

const UploadAnswer = z.object({ items: z.array(UploadItem) });

let uploads: readonly Upload[] = [];
const requests = new Map<string, XMLHttpRequest>();
const listeners = new Set<() => void>();

function set(next: readonly Upload[]): void {
  uploads = next;
  for (const listener of listeners) listener();
}

function change(id: string, changes: Partial<Upload>): void {
  set(uploads.map((upload) => (upload.id === id ? { ...upload, ...changes } : upload)));
}

/** Every upload of this page since it was opened that hasn't been put away, oldest first. */
export const useUploads = (): readonly Upload[] =>
  useSyncExternalStore(
    (listener) => {
      listeners.add(listener);
      return () => listeners.delete(listener);
    },
    () => uploads,
  );

/** Puts files in the queue. They go one per request, three at a time, and go on when the person leaves the screen. */
export function addUploads(
  files: readonly File[],
  target: { labId: string; campaignId: string | null },
): void {
  set([
    ...uploads,
    ...files.map((file): Upload => {
      const tooLarge = file.size > MAX_FILE_BYTES;
      return {
        id: crypto.randomUUID(),
        ...target,
        file,
        phase: tooLarge ? 'refused' : 'waiting',
        sentBytes: 0,
        startedAt: 0,
        captureId: null,
        error: tooLarge ? 'It is larger than 256 MiB. Export fewer traces or points per file.' : null,
      };
    }),
  ]);
  pump();
}

/** Takes an upload off the list; one that is being sent is stopped and leaves nothing on the server. */
export function dismissUpload(id: string): void {
  set(uploads.filter((upload) => upload.id !== id));
  requests.get(id)?.abort();
  requests.delete(id);
  pump();
}

/** Sends a lost file again, from its beginning. */
export function retryUpload(id: string): void {
  change(id, { phase: 'waiting', sentBytes: 0, error: null });
  pump();
}

function pump(): void {
  const free = AT_ONCE - uploads.filter(({ phase }) => phase === 'sending').length;
  const next = uploads.filter(({ phase }) => phase === 'waiting').slice(0, Math.max(0, free));
  for (const upload of next) send(upload);
}

function send(upload: Upload): void {
  const { id } = upload;
  const request = new XMLHttpRequest();
  requests.set(id, request);
  change(id, { phase: 'sending', startedAt: performance.now(), sentBytes: 0 });

  request.upload.onprogress = ({ loaded, total }) => {
    change(id, { sentBytes: total > 0 ? Math.round((loaded / total) * upload.file.size) : 0 });
  };
  const end = (changes: Partial<Upload>) => {
    requests.delete(id);
    change(id, changes);
    pump();
  };
  request.onerror = () => end({ phase: 'lost', error: 'The connection dropped. Nothing of it was stored.' });
  request.onload = () => void settle(upload, request).then(end);
  request.open('POST', `/api/labs/${upload.labId}/captures`);
  request.setRequestHeader('accept', 'application/json, application/problem+json');
  request.send(formOf(upload));
}

function formOf({ campaignId, file }: Upload): FormData {
  const form = new FormData();
  if (campaignId !== null) form.set('campaignId', campaignId);
  form.append('files', file, file.name);
  return form;
}

async function settle(upload: Upload, request: XMLHttpRequest): Promise<Partial<Upload>> {
  if (request.status === 401) {
    return (await recoverSession())
      ? { phase: 'waiting', sentBytes: 0 }
      : { phase: 'lost', error: 'You were signed out before it was stored.' };
  }
  if (request.status === 429 || request.status >= 500) {
    const { message } = toProblem(request.status, request.responseText, null);
    return { phase: 'lost', error: message };
  }
  if (request.status >= 400) {
    return { phase: 'refused', error: toProblem(request.status, request.responseText, null).message };
  }
  const answer = UploadAnswer.safeParse(safeJson(request.responseText));
  const item = answer.success ? answer.data.items.at(0) : undefined;
  if (item === undefined)
    return {
      phase: 'lost',
      error: 'The server’s answer can’t be read. Reload the page and look for the file.',
    };
  if (item.error !== null || item.id === null)
    return { phase: 'refused', error: item.error ?? 'The server refused the file.' };
  return { phase: item.duplicate ? 'duplicate' : 'stored', captureId: item.id, sentBytes: upload.file.size };
}

if (typeof window !== 'undefined') {
  window.addEventListener('online', () => {
    for (const { id, phase } of uploads) if (phase === 'lost') retryUpload(id);
  });
  window.addEventListener('beforeunload', (event) => {
    if (uploads.some(({ phase }) => phase === 'sending' || phase === 'waiting')) event.preventDefault();
  });
}
