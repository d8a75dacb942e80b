import { useQueryClient } from '@tanstack/react-query';
import { useMemo, useState, type FormEvent } from 'react';
import { Navigate, useNavigate, useSearchParams } from 'react-router-dom';
import { SignIn, type Session } from '../../../shared/session.ts';
import { ApiProblem } from '../../api/http.ts';
import { sessionKey, useHealth, useSignIn } from '../../api/session.ts';
import { Button } from '../../components/ui/button.tsx';
import { Field } from '../../components/ui/field.tsx';
import { fixed } from '../../lib/format.ts';
import { BANDWIDTH_DB, LOG_BIAS_DB, simulateTrace, TRUE_DENSITY_DBM_PER_HZ } from './simulated-trace.ts';
import { TraceDrawing } from './trace-drawing.tsx';

/** The page that was asked for before sign-in; only paths of this site. */
function pageAskedFor(to: string | null): string {
  return to !== null && /^\/(?![/\\])/.test(to) ? to : '/captures';
}

export function SignInPage() {
  const [params] = useSearchParams();
  const client = useQueryClient();
  const destination = pageAskedFor(params.get('to'));
  const signedIn = client.getQueryData<Session | null>(sessionKey);
  if (signedIn) return <Navigate to={destination} replace />;
  return (
    <div className="flex min-h-screen flex-col wide:grid wide:grid-cols-[minmax(0,1fr)_460px]">
      <title>Sign in · Perhertz</title>
      <Pitch />
      <main className="flex flex-col justify-center max-wide:grow max-wide:justify-start border-rule bg-sheet px-16 py-12 max-wide:border-t max-phone:px-5 wide:border-l">
        <Form destination={destination} asked={params.has('to')} />
      </main>
    </div>
  );
}

function Form({ destination, asked }: { destination: string; asked: boolean }) {
  const navigate = useNavigate();
  const signIn = useSignIn();
  const [email, setEmail] = useState('');
  const [password, setPassword] = useState('');
  const [errors, setErrors] = useState<{ email?: string; password?: string }>({});

  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const body = SignIn.safeParse({ email: email.trim(), password });
    const emailWrong = !SignIn.shape.email.safeParse(email.trim()).success;
    setErrors({
      email: emailWrong ? 'Write the whole address, such as name@lab.example.' : undefined,
      password: password === '' ? 'Write the password too.' : undefined,
    });
    if (!body.success) return;
    signIn.mutate(body.data, {
      onSuccess: () => void navigate(destination, { replace: true }),
      onError: () => setPassword(''),
    });
  };

  const paused = signIn.error instanceof ApiProblem && signIn.error.status === 429;
  return (
    <form onSubmit={submit} noValidate className="mx-auto grid w-full max-w-[332px] gap-4">
      <h1 className="text-title font-semibold">Sign in</h1>
      {asked && <p className="-mt-2 text-table text-ink2">Then the page that you asked for opens.</p>}
      <Field label="Email" layout="stack" error={errors.email}>
        {(ids) => (
          <input
            {...ids}
            className="field h-9!"
            type="email"
            name="email"
            autoComplete="username"
            autoFocus
            required
            value={email}
            onChange={(event) => setEmail(event.target.value)}
          />
        )}
      </Field>
      <Field label="Password" layout="stack" error={errors.password ?? signIn.error?.message}>
        {(ids) => (
          <input
            {...ids}
            className="field h-9!"
            type="password"
            name="password"
            autoComplete="current-password"
            required
            value={password}
            onChange={(event) => setPassword(event.target.value)}
          />
        )}
      </Field>
      <div className="mt-1">
        <Button kind="primary" type="submit" className="px-6" disabled={signIn.isPending}>
          {signIn.isPending ? 'Signing in…' : paused ? 'Try again' : 'Sign in'}
        </Button>
      </div>
      <p className="mt-3 border-t border-rule pt-4 text-caption text-ink3">
        You stay signed in on this computer for 12 hours after your last visit. New here, or the password is
        forgotten? The administrator of your lab lets you in.
      </p>
    </form>
  );
}

/** What the tool does, shown on a trace whose true density is known. */
function Pitch() {
  const health = useHealth();
  const trace = useMemo(() => simulateTrace(1), []);
  return (
    <header className="flex flex-col px-16 pt-10 pb-10 max-phone:px-5 max-phone:pt-6 max-phone:pb-6 max-wide:pb-8">
      <p className="w-32 border-b border-ink pb-1 text-[18px] leading-6 font-semibold">Perhertz</p>
      <div className="my-auto max-w-[840px] py-8 max-wide:mx-auto max-phone:py-4 wide:w-full wide:pl-6">
        <p className="max-w-[460px] text-[22px] leading-[30px] font-medium tracking-[-0.01em] max-phone:text-[19px] max-phone:leading-[26px]">
          From a trace to a noise density, with every correction on the page.
        </p>
        <div className="mt-6 max-phone:hidden">
          <TraceDrawing trace={trace} />
        </div>
        <p className="mt-5 max-w-[600px] text-caption text-ink3 max-phone:hidden">
          A simulation: 20 sweeps averaged on the log scale, three spurs left out, {trace.usedPoints} points.
          The floor reads <Value>{fixed(trace.meanDbm, 2)}</Value> dBm in 10 kHz; less the log-average bias of{' '}
          <Value>{fixed(LOG_BIAS_DB, 2)}</Value> dB and with the noise bandwidth,{' '}
          <Value>{fixed(BANDWIDTH_DB, 2)}</Value> dB, that is <Value>{fixed(trace.densityDbmPerHz, 2)}</Value>{' '}
          dBm/Hz. It was made with <Value>{fixed(TRUE_DENSITY_DBM_PER_HZ, 2)}</Value>.
        </p>
      </div>
      <p className="min-h-5 text-caption text-ink3 max-phone:hidden">
        {health.data !== undefined && `Engine ${health.data.engineVersion}`}
        {health.isError && 'The server can’t be reached at the moment.'}
      </p>
    </header>
  );
}

function Value({ children }: { children: string }) {
  return <span className="font-mono whitespace-nowrap">{children}</span>;
}
