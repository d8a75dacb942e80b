import { LinkButton } from '../../../components/ui/button.tsx';
import { fullTime } from '../../../lib/time.ts';
import { type Held, originWords } from './held.ts';

function detailOf({ origin, unsaved }: Held): string | undefined {
  if (unsaved || origin === null) return undefined;
  if (origin.kind === 'assumed') return origin.reason;
  if (origin.kind === 'person') return `${origin.name}, ${fullTime(origin.at)}`;
  return origin.kind === 'file' ? origin.text : undefined;
}

/** Where a setting came from, and the way back to what the file says. */
export function SourceNote({
  held,
  label,
  onBack,
}: {
  held: Held;
  label: string;
  onBack: (() => void) | null;
}) {
  const words = held.unsaved && held.byPerson ? 'unsaved' : originWords(held.origin);
  const way = held.inFile === null ? 'take it back' : 'back to the file';
  const offersBack = onBack !== null && held.byPerson && (held.unsaved || held.inFile !== null);
  return (
    <span title={detailOf(held)}>
      <span className={held.unsaved ? 'text-est' : undefined}>{words}</span>
      {offersBack && (
        <>
          {' '}
          <LinkButton onClick={onBack} aria-label={`${label}: ${way}`} className="text-left">
            {way}
          </LinkButton>
        </>
      )}
    </span>
  );
}

/** Assumed and unstated values are written in ochre. */
export const isAssumed = ({ origin, unsaved, value }: Held): boolean =>
  origin?.kind === 'assumed' || (value === null && !unsaved);
