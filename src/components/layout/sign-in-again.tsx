import { useEffect, useRef, useState, type FormEvent } from 'react';
import { useQueryClient } from '@tanstack/react-query';
import { onSessionExpired } from '../../api/http.ts';
import { sessionKey, useSignIn } from '../../api/session.ts';
import { useLab } from '../../lib/use-lab.ts';
import { Button } from '../ui/button.tsx';
import { Dialog, DialogActions } from '../ui/dialog.tsx';
import { Field } from '../ui/field.tsx';

/** When a session runs out in the middle of work: asks for the password in place, then the work goes on. */
export function SignInAgain() {
  const { session } = useLab();
  const client = useQueryClient();
  const signIn = useSignIn();
  const [open, setOpen] = useState(false);
  const waiting = useRef<((signedIn: boolean) => void)[]>([]);

  useEffect(() => {
    onSessionExpired(
      () =>
        new Promise((resolve) => {
          waiting.current.push(resolve);
          setOpen(true);
        }),
    );
    return () => onSessionExpired(null);
  }, []);

  const finish = (signedIn: boolean) => {
    setOpen(false);
    for (const resolve of waiting.current.splice(0)) resolve(signedIn);
  };

  const submit = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault();
    const password = String(new FormData(event.currentTarget).get('password') ?? '');
    signIn.mutate({ email: session.person.email, password }, { onSuccess: () => finish(true) });
  };

  return (
    <Dialog
      open={open}
      onOpenChange={() => undefined}
      dismissible={false}
      title="Your session has run out"
      description="What you have typed is still here. Sign in again and it goes on."
    >
      <form onSubmit={submit} className="grid gap-3">
        <input type="hidden" name="email" autoComplete="username" value={session.person.email} readOnly />
        <Field label={`Password of ${session.person.email}`} layout="stack" error={signIn.error?.message}>
          {(ids) => (
            <input
              {...ids}
              className="field"
              type="password"
              name="password"
              autoComplete="current-password"
              required
              autoFocus
            />
          )}
        </Field>
        <DialogActions>
          <Button
            kind="quiet"
            onClick={() => {
              finish(false);
              client.setQueryData(sessionKey, null);
            }}
          >
            Leave
          </Button>
          <Button kind="primary" type="submit" disabled={signIn.isPending}>
            {signIn.isPending ? 'Signing in…' : 'Sign in again'}
          </Button>
        </DialogActions>
      </form>
    </Dialog>
  );
}
