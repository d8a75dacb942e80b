import { useQueries } from '@tanstack/react-query';
import { memo, type ReactNode } from 'react';
import { Link } from 'react-router-dom';
import type { Capture } from '../../../shared/capture.ts';
import { captureOptions } from '../../api/captures.ts';
import { dismissUpload, retryUpload, useUploads, type Upload } from '../../api/uploads.ts';
import { LinkButton } from '../../components/ui/button.tsx';
import { Message } from '../../components/ui/message.tsx';
import { Progress } from '../../components/ui/progress.tsx';
import { countWords, fileSize, fixed } from '../../lib/format.ts';

const SHOWN = 12;

interface Tracked {
  upload: Upload;
  capture: Capture | undefined;
}

/** The lab's uploads with the captures that became of them, followed until each is read. */
function useTracked(labId: string): Tracked[] {
  const uploads = useUploads().filter((upload) => upload.labId === labId);
  const ids = [...new Set(uploads.flatMap(({ captureId }) => (captureId === null ? [] : [captureId])))];
  const captures = useQueries({
    queries: ids.map((id) => ({
      ...captureOptions(id),
      refetchInterval: ({ state: { data } }: { state: { data?: Capture } }) =>
        data === undefined || data.state === 'received' || data.state === 'reading' ? 2_000 : false,
    })),
  });
  const byId = new Map(ids.map((id, index) => [id, captures[index].data]));
  return uploads.map((upload) => ({
    upload,
    capture: upload.captureId === null ? undefined : byId.get(upload.captureId),
  }));
}

const isReady = ({ upload, capture }: Tracked) => upload.phase === 'stored' && capture?.state === 'ready';

/** What happens to the files that were dropped: sending, reading, waiting for a person, refused, done. */
export const UploadPanel = memo(function UploadPanel({ labId }: { labId: string }) {
  const tracked = useTracked(labId);
  if (tracked.length === 0) return null;
  const ready = tracked.filter(isReady);
  const open = tracked.filter((item) => !isReady(item));
  const putAway = () => ready.forEach(({ upload }) => dismissUpload(upload.id));
  return (
    <section aria-label="Files on their way" className="border-b border-rule pb-2">
      <p className="sr-only" role="status">
        {summary(tracked, ready.length)}
      </p>
      {open.length > 0 && (
        <ul className="grid grid-cols-3 gap-x-7 gap-y-3 pt-3 pb-1 max-wide:grid-cols-2 max-phone:grid-cols-1">
          {open.slice(0, SHOWN).map((item) => (
            <li key={item.upload.id} className="min-w-0">
              <UploadLine {...item} />
            </li>
          ))}
        </ul>
      )}
      {open.length > SHOWN && (
        <p className="py-1 text-caption text-ink3">and {countWords(open.length - SHOWN)} more files</p>
      )}
      {ready.length > 0 && (
        <div className="[&>div]:border-b-0 [&>div]:pb-1">
          <Message
            tone="done"
            title={<ReadyTitle ready={ready} />}
            actions={<LinkButton onClick={putAway}>Put this line away</LinkButton>}
          />
        </div>
      )}
    </section>
  );
});

function summary(tracked: readonly Tracked[], ready: number): string {
  const count = (phase: Upload['phase']) => tracked.filter(({ upload }) => upload.phase === phase).length;
  const parts = [
    [count('sending') + count('waiting'), 'to send'],
    [count('stored') - ready, 'being read'],
    [ready, 'ready'],
    [count('duplicate'), 'already here'],
    [count('refused') + count('lost'), 'not stored'],
  ] as const;
  return parts
    .filter(([n]) => n > 0)
    .map(([n, words]) => `${n} ${words}`)
    .join(', ');
}

function ReadyTitle({ ready }: { ready: readonly Tracked[] }) {
  const named = ready.slice(-6);
  return (
    <>
      {ready.length === 1 ? '1 capture is ready: ' : `${countWords(ready.length)} captures are ready: `}
      {named.map(({ upload, capture }, index) => (
        <span key={upload.id} className="font-normal">
          {index > 0 && ', '}
          <Link className="link" to={`/captures/${capture?.id ?? ''}`}>
            {capture?.name}
          </Link>
          {density(capture)}
        </span>
      ))}
      {ready.length > named.length && (
        <span className="font-normal"> and {countWords(ready.length - named.length)} more</span>
      )}
      .
    </>
  );
}

function density(capture: Capture | undefined) {
  const value = capture?.estimate?.dbmPerHz;
  if (value === null || value === undefined) return null;
  return (
    <>
      {' '}
      <span className="font-mono">{fixed(value, 2)}</span>&nbsp;dBm/Hz
    </>
  );
}

function UploadLine({ upload, capture }: Tracked) {
  const look = lookOf(upload, capture);
  return (
    <div className="grid gap-1">
      <div className="flex items-baseline justify-between gap-3">
        <span className="truncate font-mono text-table" title={upload.file.name}>
          {upload.file.name}
        </span>
        <span className={`shrink-0 text-caption ${look.tone ?? 'font-mono text-ink3'}`}>{look.progress}</span>
      </div>
      <Progress label={`${upload.file.name}: ${look.progress}`} share={look.share} waiting={look.waiting} />
      <div className="flex items-baseline justify-between gap-3 text-caption text-ink2">
        <span className={look.bad === true ? 'text-bad' : ''}>{look.meaning}</span>
        <span className="flex shrink-0 items-baseline gap-3">{look.action}</span>
      </div>
    </div>
  );
}

interface Look {
  progress: string;
  share: number | null;
  meaning: string;
  action: ReactNode;
  tone?: string;
  waiting?: boolean;
  bad?: boolean;
}

const away = (upload: Upload, word: string) => (
  <LinkButton onClick={() => dismissUpload(upload.id)}>{word}</LinkButton>
);

function lookOf(upload: Upload, capture: Capture | undefined): Look {
  const size = fileSize(upload.file.size);
  switch (upload.phase) {
    case 'waiting':
      return { progress: size, share: 0, meaning: 'waits for its turn', action: away(upload, 'Stop') };
    case 'sending':
      return {
        progress: `sent ${fileSize(upload.sentBytes)} of ${size}`,
        share: upload.file.size === 0 ? 1 : upload.sentBytes / upload.file.size,
        meaning: timeLeft(upload),
        action: away(upload, 'Stop'),
      };
    case 'lost':
      return {
        progress: 'not sent',
        share: 0,
        tone: 'text-warn font-semibold',
        meaning: upload.error ?? 'The connection dropped.',
        action: (
          <>
            <LinkButton onClick={() => retryUpload(upload.id)}>Send again</LinkButton>
            {away(upload, 'Drop it')}
          </>
        ),
      };
    case 'refused':
      return {
        progress: 'not stored',
        share: 0,
        tone: 'text-bad font-semibold',
        bad: true,
        meaning: upload.error ?? '',
        action: away(upload, 'Put away'),
      };
    case 'duplicate':
      return {
        progress: 'the same bytes',
        share: 1,
        tone: 'text-ink3',
        meaning: capture === undefined ? 'Already here.' : `Already here as ${capture.number}.`,
        action: (
          <>
            {upload.captureId !== null && (
              <Link className="link" to={`/captures/${upload.captureId}`}>
                Open {capture?.number ?? 'it'}
              </Link>
            )}
            {away(upload, 'Put away')}
          </>
        ),
      };
    case 'stored':
      return lookOfCapture(upload, capture);
  }
}

function lookOfCapture(upload: Upload, capture: Capture | undefined): Look {
  const open = (words: string) => (
    <Link className="link" to={`/captures/${upload.captureId ?? ''}`}>
      {words}
    </Link>
  );
  if (capture?.state === 'unreadable') {
    return {
      progress: 'can’t be read',
      share: 1,
      tone: 'text-bad font-semibold',
      bad: true,
      meaning: capture.problem?.message ?? 'The file can’t be read; it is kept as it is.',
      action: (
        <>
          {open('See why')}
          {away(upload, 'Put away')}
        </>
      ),
    };
  }
  if (capture?.state === 'needsSettings') {
    return {
      progress: 'waits for you',
      share: 1,
      tone: 'text-warn font-semibold',
      waiting: true,
      meaning: 'A setting isn’t stated without which no single density can be given.',
      action: (
        <>
          {open('Say which it is')}
          {away(upload, 'Later')}
        </>
      ),
    };
  }
  const progress = capture?.progress ?? null;
  if (capture?.state !== 'reading' || progress === null) {
    return {
      progress: `stored, ${fileSize(upload.file.size)}`,
      share: null,
      meaning: 'stored; waits to be read',
      action: null,
    };
  }
  const of = progress.ofPoints === null ? '' : ` of ${countWords(progress.ofPoints)}`;
  const points = progress.points === 0 ? '' : ` ${countWords(progress.points)}${of}`;
  return {
    progress: `reading${points}`,
    share: progress.ofPoints === null ? null : progress.points / progress.ofPoints,
    meaning: 'the worker reads it',
    action: open(`Open ${capture.number}`),
  };
}

function timeLeft({ file, sentBytes, startedAt }: Upload): string {
  const seconds = (performance.now() - startedAt) / 1000;
  if (sentBytes >= file.size) return 'sent; being stored';
  if (sentBytes === 0 || seconds < 0.5) return 'sending';
  return `about ${Math.max(1, Math.round(((file.size - sentBytes) / sentBytes) * seconds))} s left`;
}
