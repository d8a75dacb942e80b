import type { Logger } from 'pino';

const PATIENCE_MS = 9000;

/** On SIGTERM or SIGINT finishes what is under way, and ends the process within ten seconds whatever happens. */
export function stopInTime(log: Logger, stop: () => Promise<void>): void {
  let stopping = false;
  const end = (signal: string) => {
    if (stopping) return;
    stopping = true;
    log.info({ signal }, 'stopping');
    setTimeout(() => {
      log.warn('what is under way took too long; ending');
      process.exit(1);
    }, PATIENCE_MS).unref();
    stop().then(
      () => process.exit(0),
      (error: unknown) => {
        log.error({ err: error }, 'stopping failed');
        process.exit(1);
      },
    );
  };
  process.on('SIGTERM', end);
  process.on('SIGINT', end);
}
