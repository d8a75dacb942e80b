import type { Capture } from '../../../../shared/capture.ts';
import { useHealth } from '../../../api/session.ts';
import { Progress } from '../../../components/ui/progress.tsx';
import { countWords, fileSize } from '../../../lib/format.ts';

/** A capture that waits for the worker or is being read; the page goes on by itself. */
export function ReadingState({ capture }: { capture: Capture }) {
  const health = useHealth();
  const { progress, state, bytes } = capture;
  const workerIsAway = health.data !== undefined && !health.data.worker;
  const waiting = state === 'received';
  const points = progress === null || progress.points === 0 ? '' : ` ${countWords(progress.points)}`;
  const of = progress === null || progress.ofPoints === null ? '' : ` of ${countWords(progress.ofPoints)}`;
  const words = waiting
    ? `stored, ${fileSize(bytes)}`
    : `reading${points}${points === '' ? '' : `${of} points`}`;
  const share = progress?.ofPoints ? progress.points / progress.ofPoints : null;
  return (
    <div role="status" className="mt-5 grid max-w-[640px] gap-2 border-t border-ink pt-4">
      <p className="text-verdict">
        {waiting ? 'The file is stored and waits to be read.' : 'The file is being read.'}
      </p>
      <span className="font-mono text-table text-ink2">{words}</span>
      <Progress label={words} share={waiting ? 0 : share} waiting={workerIsAway} />
      <p className="text-table text-ink2">
        {workerIsAway
          ? 'No worker is running. The file is read as soon as one is back; nothing has to be sent again.'
          : 'Trace, ledger and averaging check stand here as soon as it is done; the page needn’t be loaded again.'}
      </p>
    </div>
  );
}
