import { Link } from 'react-router-dom';
import { ApiProblem } from '../../../api/http.ts';
import { buttonClass } from '../../../components/ui/button.tsx';
import { ErrorState } from '../../../components/ui/states.tsx';

/** The capture isn't there, or couldn't be loaded. */
export function FailedState({ error, onRetry }: { error: Error; onRetry: () => void }) {
  const missing = error instanceof ApiProblem && (error.status === 404 || error.status === 400);
  if (missing) {
    return (
      <div className="max-w-[640px]">
        <title>No such capture · Perhertz</title>
        <h1 className="text-title font-semibold">No such capture</h1>
        <p className="mt-3 text-verdict">
          There is no capture at this address, or it belongs to a lab that you aren’t in.
        </p>
        <Link className={`${buttonClass('primary')} mt-4`} to="/captures">
          Go to the captures
        </Link>
      </div>
    );
  }
  return (
    <div className="max-w-[760px]">
      <title>Capture · Perhertz</title>
      <h1 className="mb-4 text-title font-semibold">Capture</h1>
      <ErrorState what="The capture couldn’t be loaded." error={error} onRetry={onRetry} />
    </div>
  );
}
