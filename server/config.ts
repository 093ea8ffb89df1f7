import { z } from 'zod';

const flag = z.enum(['true', 'false']).transform((text) => text === 'true');
const integer = (min: number, max: number) =>
  z
    .string()
    .regex(/^\d+$/, 'must be a whole number')
    .transform(Number)
    .refine((value) => value >= min && value <= max, `must lie between ${min} and ${max}`);

/** One entry per setting: environment variable, flag where a person would type it, and what it is for. */
export const settings = {
  HOST: { flag: '--host', help: 'address to listen on', fallback: '127.0.0.1', schema: z.string().min(1) },
  PORT: { flag: '--port', help: 'port to listen on', fallback: '8787', schema: integer(0, 65535) },
  DATABASE_URL: {
    flag: '--database',
    help: 'file:<path> of the ledger',
    fallback: 'file:./var/ledger.sqlite',
    schema: z.string().startsWith('file:', 'must begin with file:'),
  },
  ADMIN_KEY: {
    flag: null,
    help: 'administrator key of an empty database, 32 characters or more',
    fallback: '',
    schema: z.string().refine((text) => text === '' || text.length >= 32, 'must have 32 characters or more'),
  },
  METRICS_OPEN: { flag: null, help: 'true lets /metrics be read without a key', fallback: 'false', schema: flag },
  SHUTDOWN_S: {
    flag: '--shutdown-s',
    help: 'seconds that running requests get at the end',
    fallback: '10',
    schema: integer(0, 600),
  },
  LOG_LEVEL: {
    flag: '--log-level',
    help: 'fatal, error, warn, info, debug, trace or silent',
    fallback: 'info',
    schema: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']),
  },
  RATE_LIMIT_PER_MINUTE: {
    flag: null,
    help: 'requests a minute that one key may make',
    fallback: '60000',
    schema: integer(1, 100_000_000),
  },
  BODY_LIMIT_BYTES: {
    flag: null,
    help: 'greatest size of a request body, save where a route says otherwise',
    fallback: '1048576',
    schema: integer(1024, 1_073_741_824),
  },
  WEBHOOK_ALLOW_PRIVATE: { flag: null, help: 'true lets webhooks reach private addresses', fallback: 'false', schema: flag },
  WORKER_THREADS: {
    flag: '--worker-threads',
    help: 'threads for reference runs; 0 takes one per core',
    fallback: '0',
    schema: integer(0, 256),
  },
  REFERENCE_RUN_QUEUE: { flag: null, help: 'reference runs that may wait', fallback: '16', schema: integer(1, 10_000) },
} as const;

export interface Config {
  readonly host: string;
  readonly port: number;
  readonly databaseFile: string;
  readonly adminKey: string | null;
  readonly metricsOpen: boolean;
  readonly shutdownS: number;
  readonly logLevel: string;
  readonly rateLimitPerMinute: number;
  readonly bodyLimitBytes: number;
  readonly webhookAllowPrivate: boolean;
  readonly workerThreads: number;
  readonly referenceRunQueue: number;
}

/** A setting that cannot be used; its message is one clear line. */
export class ConfigError extends Error {}

type SettingName = keyof typeof settings;

/** Settings from the environment, with flags over them. */
export function readConfig(environment: Readonly<Record<string, string | undefined>>): Config {
  const read = <N extends SettingName>(name: N): z.output<(typeof settings)[N]['schema']> => {
    const { schema, fallback } = settings[name];
    const given = environment[name];
    const parsed = schema.safeParse(given === undefined || given === '' ? fallback : given);
    if (!parsed.success) throw new ConfigError(`${name} ${parsed.error.issues[0]?.message ?? 'is wrong'}`);
    return parsed.data as z.output<(typeof settings)[N]['schema']>;
  };
  const adminKey = read('ADMIN_KEY');
  return Object.freeze({
    host: read('HOST'),
    port: read('PORT'),
    databaseFile: read('DATABASE_URL').slice('file:'.length),
    adminKey: adminKey === '' ? null : adminKey,
    metricsOpen: read('METRICS_OPEN'),
    shutdownS: read('SHUTDOWN_S'),
    logLevel: read('LOG_LEVEL'),
    rateLimitPerMinute: read('RATE_LIMIT_PER_MINUTE'),
    bodyLimitBytes: read('BODY_LIMIT_BYTES'),
    webhookAllowPrivate: read('WEBHOOK_ALLOW_PRIVATE'),
    workerThreads: read('WORKER_THREADS'),
    referenceRunQueue: read('REFERENCE_RUN_QUEUE'),
  });
}

/** The process environment; nothing else reads it. */
export function processEnvironment(): Readonly<Record<string, string | undefined>> {
  return process.env;
}
