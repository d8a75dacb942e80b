import { isRouteErrorResponse, useRouteError } from 'react-router-dom';
import { Button } from '../../components/ui/button.tsx';

/** What stands in for the whole page when it failed. */
export function ErrorPage() {
  return (
    <main className="p-8">
      <ErrorPanel />
    </main>
  );
}

/** What stands in for a screen that failed; the rail stays. */
export function ErrorPanel() {
  const error = useRouteError();
  const detail = isRouteErrorResponse(error)
    ? error.statusText
    : error instanceof Error
      ? error.message
      : String(error);
  const stale = /dynamically imported module|Importing a module/i.test(detail);
  return (
    <div className="max-w-[640px]">
      <title>Stopped · Perhertz</title>
      <h1 className="text-title font-semibold">This screen stopped</h1>
      <p className="mt-3 text-verdict">
        {stale
          ? 'A part of the page couldn’t be loaded: the connection dropped, or the server has a newer version.'
          : 'Something failed in the page itself. What the server holds is untouched.'}
      </p>
      <p className="mt-2 font-mono text-caption break-words text-ink3">{detail}</p>
      <div className="mt-4 flex gap-2.5">
        <Button kind="primary" onClick={() => location.reload()}>
          Load it again
        </Button>
        <Button kind="quiet" onClick={() => location.assign('/captures')}>
          Go to the captures
        </Button>
      </div>
    </div>
  );
}
