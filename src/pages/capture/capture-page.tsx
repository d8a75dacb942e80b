import { useParams } from 'react-router-dom';
import type { Capture } from '../../../shared/capture.ts';
import { useCapture } from '../../api/captures.ts';
import { CaptureHeader } from './capture-header.tsx';
import { FailedState } from './states/failed-state.tsx';
import { LoadingState } from './states/loading-state.tsx';
import { ReadingState } from './states/reading-state.tsx';
import { UnreadableState } from './states/unreadable-state.tsx';
import { Chip } from '../../components/ui/chip.tsx';
import { Workbench } from './workbench.tsx';

/** One capture: trace, ledger, averaging check, spurs, settings, findings and its estimates. */
export function CapturePage() {
  const { captureId = '' } = useParams();
  const query = useCapture(captureId);
  if (query.isPending) return <LoadingState />;
  if (query.data === undefined) {
    return <FailedState error={query.error} onRetry={() => void query.refetch()} />;
  }
  const capture = query.data;
  if (capture.state === 'ready' || capture.state === 'needsSettings') {
    return <Workbench key={capture.id} capture={capture} />;
  }
  return (
    <>
      <CaptureHeader capture={capture} actions={<StateChip state={capture.state} />} />
      {capture.state === 'unreadable' ? (
        <UnreadableState capture={capture} />
      ) : (
        <ReadingState capture={capture} />
      )}
    </>
  );
}

function StateChip({ state }: { state: Capture['state'] }) {
  if (state === 'unreadable') return <Chip tone="bad">Unreadable</Chip>;
  return <Chip>{state === 'received' ? 'Received' : 'Reading'}</Chip>;
}
