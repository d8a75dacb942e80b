import type { z } from 'zod';
import { Problem } from '../../shared/problem.ts';

/** An answer that says what went wrong (RFC 9457). `message` is its sentence. */
export class ApiProblem extends Error {
  readonly problem: Problem;
  readonly status: number;
  readonly retryAfterS: number | null;

  constructor(problem: Problem, retryAfterS: number | null = null) {
    super(problem.detail || problem.title);
    this.name = 'ApiProblem';
    this.problem = problem;
    this.status = problem.status;
    this.retryAfterS = retryAfterS;
  }
}

/** The server couldn't be reached. */
export class NetworkFailure extends Error {
  constructor() {
    super('The server can’t be reached. Check the connection; nothing that you typed is lost.');
    this.name = 'NetworkFailure';
  }
}

/** The server answered something that this version of the page doesn't understand. */
export class UnexpectedAnswer extends Error {
  constructor(path: string, cause: unknown) {
    super('The server’s answer can’t be read by this page. Reload it; it may be older than the server.', {
      cause,
    });
    this.name = 'UnexpectedAnswer';
    console.error(`Unexpected answer of ${path}`, cause);
  }
}

type SignInAgain = () => Promise<boolean>;
let signInAgain: SignInAgain | null = null;

/**
 * Registers what happens when a session has run out in the middle of work: the function shows a sign-in dialog in place
 * and resolves to true once signed in again; the request that met the 401 is then repeated, so no form is lost.
 */
export function onSessionExpired(handler: SignInAgain | null): void {
  signInAgain = handler;
}

/** Asks for a new sign-in where somebody handles it; false where nobody does or it was given up. */
export async function recoverSession(): Promise<boolean> {
  return signInAgain === null ? false : signInAgain();
}

/** The problem that an answer carries, or one made from its status. */
export function toProblem(status: number, text: string, retryAfter: string | null): ApiProblem {
  const parsed = Problem.safeParse(safeJson(text));
  const retryAfterS = retryAfter !== null && Number.isFinite(Number(retryAfter)) ? Number(retryAfter) : null;
  if (parsed.success) return new ApiProblem(parsed.data, retryAfterS);
  const detail =
    status >= 500
      ? 'The server failed to answer. Nothing was changed; try again in a moment.'
      : `The server refused this (status ${status}).`;
  return new ApiProblem({ type: 'about:blank', title: 'Request failed', status, detail }, retryAfterS);
}

export function safeJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return undefined;
  }
}

interface RequestOptions {
  method?: 'GET' | 'POST' | 'PATCH' | 'PUT' | 'DELETE';
  body?: unknown;
  signal?: AbortSignal;
  /** False for sign-in itself, where 401 is an answer and not an expired session. */
  recover?: boolean;
}

async function send(path: string, options: RequestOptions): Promise<Response> {
  try {
    return await fetch(path, {
      method: options.method ?? 'GET',
      headers: {
        accept: 'application/json, application/problem+json',
        ...(options.body === undefined ? {} : { 'content-type': 'application/json' }),
      },
      body: options.body === undefined ? undefined : JSON.stringify(options.body),
      signal: options.signal,
      credentials: 'same-origin',
    });
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw new NetworkFailure();
  }
}

async function answered(path: string, options: RequestOptions): Promise<string> {
  const response = await send(path, options);
  if (response.status === 401 && options.recover !== false && (await recoverSession())) {
    return answered(path, { ...options, recover: false });
  }
  const text = await response.text();
  if (!response.ok) throw toProblem(response.status, text, response.headers.get('retry-after'));
  return text;
}

/**
 * Calls the API and checks the answer.
 * @param schema what the answer must be
 * @param path path and query, from the root
 * @returns the parsed answer
 * @throws ApiProblem, NetworkFailure or UnexpectedAnswer
 */
export async function request<T extends z.ZodType>(
  schema: T,
  path: string,
  options: RequestOptions = {},
): Promise<z.infer<T>> {
  const parsed = schema.safeParse(safeJson(await answered(path, options)));
  if (!parsed.success) throw new UnexpectedAnswer(path, parsed.error);
  return parsed.data;
}

/** Calls the API where the answer has no body that matters. Errors as `request`. */
export async function command(path: string, options: RequestOptions = {}): Promise<void> {
  await answered(path, options);
}

/** `?a=1&b=2` from the parts that are set; empty string where none is. */
export function queryString(parts: Record<string, string | number | undefined | null>): string {
  const query = new URLSearchParams();
  for (const [name, value] of Object.entries(parts)) {
    if (value !== undefined && value !== null && value !== '') query.set(name, String(value));
  }
  const text = query.toString();
  return text === '' ? '' : `?${text}`;
}
