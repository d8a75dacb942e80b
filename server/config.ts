import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { z } from 'zod';

const flag = z
  .enum(['0', '1'])
  .default('0')
  .transform((text) => text === '1');

const Environment = z.object({
  NODE_ENV: z.string().default('development'),
  HOST: z.string().default('127.0.0.1'),
  PORT: z.coerce.number().int().min(0).max(65535).default(4173),
  DATABASE_URL: z.url({ protocol: /^postgres(ql)?$/ }),
  SESSION_SECRET: z.string().min(16).optional(),
  LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
  PERHERTZ_MIGRATE: flag,
  PERHERTZ_TRUST_PROXY: z.coerce.number().int().min(0).max(10).default(0),
  PERHERTZ_MAX_UPLOAD_BYTES: z.coerce
    .number()
    .int()
    .positive()
    .default(256 * 1024 * 1024),
  PERHERTZ_UPLOAD_IDLE_MS: z.coerce.number().int().positive().default(30_000),
  PERHERTZ_CLIENT_DIR: z.string().optional(),
});

export interface Config {
  production: boolean;
  host: string;
  port: number;
  databaseUrl: string;
  sessionSecret: string;
  logLevel: z.infer<typeof Environment>['LOG_LEVEL'];
  migrate: boolean;
  /** Number of proxies in front of the application. */
  trustProxy: number;
  /** Cookies travel over TLS alone: in production, save on loopback without a proxy. */
  secureCookies: boolean;
  maxUploadBytes: number;
  uploadIdleMs: number;
  clientFolder: string;
  version: string;
}

/** The folder that holds package.json, seen from the sources as well as from the emitted files. */
export function projectFolder(): string {
  let folder = dirname(fileURLToPath(import.meta.url));
  while (!existsSync(join(folder, 'package.json'))) {
    const parent = dirname(folder);
    if (parent === folder) throw new Error('No package.json stands above the server files.');
    folder = parent;
  }
  return folder;
}

const LOOPBACK = ['127.0.0.1', '::1', 'localhost'];

/**
 * Turns the environment into one typed object.
 * @throws Error that names each variable that can't be used.
 */
export function readConfig(environment: Record<string, string | undefined>, secretRequired = true): Config {
  const parsed = Environment.safeParse(environment);
  if (!parsed.success) {
    const lines = parsed.error.issues.map(({ path, message }) => `${path.join('.')}: ${message}`);
    throw new Error(`The environment can't be used. ${lines.join('; ')}`);
  }
  const values = parsed.data;
  if (secretRequired && values.SESSION_SECRET === undefined) {
    throw new Error('Set SESSION_SECRET to a random text of 16 characters or more.');
  }
  const folder = projectFolder();
  const production = values.NODE_ENV === 'production';
  const manifest = z
    .object({ version: z.string() })
    .parse(JSON.parse(readFileSync(join(folder, 'package.json'), 'utf8')));
  return {
    production,
    host: values.HOST,
    port: values.PORT,
    databaseUrl: values.DATABASE_URL,
    sessionSecret: values.SESSION_SECRET ?? '',
    logLevel: values.LOG_LEVEL,
    migrate: values.PERHERTZ_MIGRATE,
    trustProxy: values.PERHERTZ_TRUST_PROXY,
    secureCookies: production && !(LOOPBACK.includes(values.HOST) && values.PERHERTZ_TRUST_PROXY === 0),
    maxUploadBytes: values.PERHERTZ_MAX_UPLOAD_BYTES,
    uploadIdleMs: values.PERHERTZ_UPLOAD_IDLE_MS,
    clientFolder: values.PERHERTZ_CLIENT_DIR ?? join(folder, 'dist', 'client'),
    version: manifest.version,
  };
}
