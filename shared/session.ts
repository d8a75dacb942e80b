import { z } from 'zod';

export const Role = z.enum(['technician', 'engineer', 'reviewer', 'administrator']);
export type Role = z.infer<typeof Role>;

export const SignIn = z.strictObject({ email: z.email().max(320), password: z.string().min(1).max(1024) });
export type SignIn = z.infer<typeof SignIn>;

/** Who is signed in, and where they belong. */
export const Session = z.object({
  person: z.object({ id: z.uuid(), name: z.string(), email: z.string() }),
  labs: z.array(z.object({ id: z.uuid(), name: z.string(), role: Role })),
});
export type Session = z.infer<typeof Session>;

export const TokenRequest = z.strictObject({ name: z.string().trim().min(1).max(100), labId: z.uuid() });
export type TokenRequest = z.infer<typeof TokenRequest>;

/** A new personal token; the secret is shown this once. */
export const NewToken = z.object({ id: z.uuid(), name: z.string(), token: z.string() });
export type NewToken = z.infer<typeof NewToken>;

/** A personal token as its list shows it. */
export const TokenSummary = z.object({
  id: z.uuid(),
  name: z.string(),
  labId: z.uuid(),
  createdAt: z.iso.datetime(),
  lastUsedAt: z.iso.datetime().nullable(),
  expiresAt: z.iso.datetime().nullable(),
});
export type TokenSummary = z.infer<typeof TokenSummary>;

export const Health = z.object({
  status: z.enum(['ok', 'degraded']),
  database: z.boolean(),
  /** A worker gave a sign of life within the last seconds. */
  worker: z.boolean(),
  engineVersion: z.string(),
  version: z.string(),
});
export type Health = z.infer<typeof Health>;
