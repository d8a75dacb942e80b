import type { z } from 'zod';
import type { Verdict } from '../policies/verdict.ts';

interface ProblemDetails {
  status: number;
  /** Short name of the kind of problem, the last part of its `type`. */
  kind: string;
  title: string;
  /** One sentence that a person can act on. */
  detail: string;
  errors?: { path: string; message: string }[];
  retryAfterSeconds?: number;
}

/** An expected failure, told as an RFC 9457 problem document. */
export class ProblemError extends Error {
  readonly details: ProblemDetails;

  constructor(details: ProblemDetails) {
    super(details.detail);
    this.details = details;
  }
}

export const notFound = (
  detail = 'There is no such thing here, or it belongs to a lab that you are not in.',
) => new ProblemError({ status: 404, kind: 'not-found', title: 'Not found', detail });

export const forbidden = (
  detail = 'Your role in this lab doesn’t allow this; ask the lab’s administrator.',
) => new ProblemError({ status: 403, kind: 'forbidden', title: 'Not allowed', detail });

export const signInFirst = () =>
  new ProblemError({
    status: 401,
    kind: 'sign-in-first',
    title: 'Signed out',
    detail: 'You’re signed out; sign in and try again.',
  });

export const conflict = (detail: string) =>
  new ProblemError({ status: 409, kind: 'conflict', title: 'In conflict', detail });

export const invalid = (detail: string, errors?: { path: string; message: string }[]) =>
  new ProblemError({ status: 400, kind: 'invalid', title: 'Not understood', detail, errors });

export const tooLarge = (detail: string) =>
  new ProblemError({ status: 413, kind: 'too-large', title: 'Too large', detail });

export const tooSlow = (detail: string) =>
  new ProblemError({ status: 408, kind: 'too-slow', title: 'Too slow', detail });

export const busy = (detail: string, retryAfterSeconds = 5) =>
  new ProblemError({ status: 503, kind: 'busy', title: 'Busy', detail, retryAfterSeconds });

/** A refusal with the place and the reason of each thing that a schema didn't accept. */
export function refused(error: z.ZodError, what: string): ProblemError {
  const errors = error.issues.map(({ path, message }) => ({ path: path.join('.'), message }));
  const [first] = errors;
  const where = first?.path ? `${first.path}: ` : '';
  return invalid(`The ${what} can’t be used. ${where}${first?.message ?? ''}`.trim(), errors);
}

/**
 * Passes a policy's verdict on.
 * @throws ProblemError 403 where it's forbidden, 404 where the object must look absent.
 */
export function authorise(verdict: Verdict): void {
  if (verdict === 'absent') throw notFound();
  if (verdict === 'forbidden') throw forbidden();
}
