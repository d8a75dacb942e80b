import { useEffect, useMemo, useState } from 'react';
import { Navigate, Outlet, ScrollRestoration, useLocation } from 'react-router-dom';
import { useLabEvents } from '../../api/events.ts';
import { useSession } from '../../api/session.ts';
import type { Session } from '../../../shared/session.ts';
import { LabContext } from '../../lib/use-lab.ts';
import { rememberedLab, rememberLab } from '../../lib/remembered-lab.ts';
import { ErrorState } from '../ui/states.tsx';
import { BlankPage } from './blank-page.tsx';
import { KeySheet } from './key-sheet.tsx';
import { PhoneBar } from './phone-bar.tsx';
import { Rail } from './rail.tsx';
import { SignInAgain } from './sign-in-again.tsx';

/** The frame of every screen behind sign-in: rail or phone bar, main, keys, and the dialog when a session has run out. */
export function Shell() {
  const session = useSession();
  const location = useLocation();
  if (session.isPending) return <BlankPage />;
  if (session.isError) {
    return (
      <main className="mx-auto max-w-[640px] p-8">
        <h1 className="mb-4 text-title font-semibold">Perhertz</h1>
        <ErrorState
          what="Who you are couldn’t be asked."
          error={session.error}
          onRetry={() => void session.refetch()}
        />
      </main>
    );
  }
  if (session.data === null) {
    const to = location.pathname + location.search + location.hash;
    return (
      <Navigate to={to === '/captures' ? '/sign-in' : `/sign-in?to=${encodeURIComponent(to)}`} replace />
    );
  }
  if (session.data.labs.length === 0) return <NoLab session={session.data} />;
  return <Frame session={session.data} />;
}

function NoLab({ session }: { session: Session }) {
  return (
    <main className="mx-auto max-w-[640px] p-8">
      <h1 className="mb-4 text-title font-semibold">No lab yet</h1>
      <p className="text-body text-ink2">
        {session.person.name}, you’re signed in but belong to no lab. Ask the administrator of your lab to add{' '}
        {session.person.email}.
      </p>
    </main>
  );
}

function Frame({ session }: { session: Session }) {
  const [labId, setLabId] = useState(rememberedLab);
  const lab = session.labs.find(({ id }) => id === labId) ?? session.labs[0];
  useLabEvents();
  useEffect(() => rememberLab(lab.id), [lab.id]);
  const place = useMemo(() => ({ session, lab, switchLab: setLabId }), [session, lab]);
  return (
    <LabContext value={place}>
      <a
        href="#main"
        className="sr-only rounded-xs bg-est px-3 py-2 text-on-est focus:not-sr-only focus:fixed focus:top-2 focus:left-2 focus:z-50"
      >
        Skip to the page
      </a>
      <PhoneBar />
      <div className="phone:grid phone:grid-cols-[168px_minmax(0,1fr)]">
        <Rail />
        <main
          id="main"
          tabIndex={-1}
          className="min-h-screen min-w-0 border-rule px-8 phone:border-l pt-6 pb-10 outline-none max-phone:min-h-0 max-phone:px-4 max-phone:pt-4"
        >
          <Outlet key={lab.id} />
        </main>
      </div>
      <KeySheet />
      <SignInAgain />
      <ScrollRestoration />
    </LabContext>
  );
}
