import { LinkButton } from '../../../components/ui/button.tsx';
import { type Held, originWords } from './held.ts';

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
  const reason = held.origin?.kind === 'assumed' ? held.origin.reason : undefined;
  return (
    <span title={reason}>
      {words}
      {held.byPerson && onBack !== null && (
        <>
          {', '}
          <LinkButton
            onClick={onBack}
            aria-label={`${label}: ${held.inFile === null ? 'take it back' : 'back to the file'}`}
          >
            {held.inFile === null ? 'take it back' : 'back to the file'}
          </LinkButton>
        </>
      )}
    </span>
  );
}

/** Assumed and unstated values are written in ochre. */
export const isAssumed = ({ origin, unsaved, value }: Held): boolean =>
  origin?.kind === 'assumed' || (value === null && !unsaved);
