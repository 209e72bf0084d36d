import { availableParallelism } from 'node:os';
import { resolve } from 'node:path';
import { z } from 'zod';
import {
  address,
  databaseAddress,
  expected,
  jobLockSeconds,
  shardMemory,
  logLevel,
  MAX_THREADS,
  readEnvironment,
  redisAddress,
  wholeNumber,
  yesOrNo,
} from './environment-values.js';
import { loadSecrets, type Secrets } from './secrets.js';

/** What the environment says, parsed. The table in README.md lists the variables for people. */
export interface Environment {
  readonly nodeEnv: 'development' | 'production' | 'test';
  readonly host: string;
  readonly port: number;
  /** Address under which people reach the product, without a trailing slash; links in mails begin with it. */
  readonly publicUrl: string;
  /** null: the server keeps a private MariaDB in the data folder. */
  readonly databaseUrl: string | null;
  /** Absolute path. */
  readonly dataDirectory: string;
  /** null: mails stay in the outbox table and their links are shown to the admin. */
  readonly smtpUrl: string | null;
  readonly mailFrom: string;
  /** 0: runs are left to worker processes; only with Redis. */
  readonly computeThreads: number;
  /** null: runs are carried inside this process. */
  readonly redisUrl: string | null;
  readonly jobLockSeconds: number;
  /** Heap in which a shard ends itself, incomplete. */
  readonly shardMemoryMegabytes: number;
  readonly logLevel: 'fatal' | 'error' | 'warn' | 'info' | 'debug' | 'trace' | 'silent';
  /** Cookies only over https. */
  readonly cookieSecure: boolean;
  /** Number of proxies in front of the server whose X-Forwarded-For is believed. */
  readonly trustedProxies: number;
  /** Loads the invented laboratory into an empty database. */
  readonly demo: boolean;
  /** Address of the first admin of an installation without the demo. */
  readonly adminEmail: string | null;
}

export interface Config extends Environment {
  readonly secrets: Secrets;
}

const environmentSchema = z
  .object({
    NODE_ENV: z.enum(['development', 'production', 'test'], expected('development, production or test')).default('production'),
    HOST: z.string().min(1, expected('a host name or an IP address')).default('127.0.0.1'),
    PORT: wholeNumber(1, 65_535).default(3210),
    PUBLIC_URL: address('http:', 'https:').optional(),
    DATABASE_URL: databaseAddress.optional(),
    ISOLOOM_DATA_DIR: z.string().min(1).default('.data'),
    SMTP_URL: address('smtp:', 'smtps:').optional(),
    MAIL_FROM: z.string().regex(/@/, expected('an e-mail address')).default('Isoloom <isoloom@localhost>'),
    COMPUTE_THREADS: wholeNumber(0, MAX_THREADS).optional(),
    REDIS_URL: redisAddress.optional(),
    JOB_LOCK_SECONDS: jobLockSeconds,
    SHARD_MEMORY_MB: shardMemory,
    LOG_LEVEL: logLevel,
    COOKIE_SECURE: yesOrNo.optional(),
    TRUSTED_PROXIES: wholeNumber(0, 10).default(0),
    DEMO: yesOrNo.default(true),
    ADMIN_EMAIL: z.email(expected('an e-mail address')).optional(),
  })
  .refine(({ COMPUTE_THREADS: threads, REDIS_URL: redisUrl }) => threads !== 0 || redisUrl !== undefined, {
    path: ['COMPUTE_THREADS'],
    ...expected(`a whole number from 1 to ${MAX_THREADS}, or 0 with a REDIS_URL whose workers do the runs`),
  });

/**
 * Parses environment variables. An empty variable counts as absent, as in most shells' habits.
 * @throws ConfigError that names every variable with a bad value
 */
export function parseEnvironment(variables: Readonly<Record<string, string | undefined>>): Environment {
  const values = readEnvironment(environmentSchema, variables);
  const publicUrl = (values.PUBLIC_URL ?? `http://${displayHost(values.HOST)}:${values.PORT}`).replace(/\/+$/, '');
  return {
    nodeEnv: values.NODE_ENV,
    host: values.HOST,
    port: values.PORT,
    publicUrl,
    databaseUrl: values.DATABASE_URL ?? null,
    dataDirectory: resolve(values.ISOLOOM_DATA_DIR),
    smtpUrl: values.SMTP_URL ?? null,
    mailFrom: values.MAIL_FROM,
    // One core stays free, so that pages answer while a run is going on.
    computeThreads: values.COMPUTE_THREADS ?? Math.max(1, availableParallelism() - 1),
    redisUrl: values.REDIS_URL ?? null,
    jobLockSeconds: values.JOB_LOCK_SECONDS,
    shardMemoryMegabytes: values.SHARD_MEMORY_MB,
    logLevel: values.LOG_LEVEL,
    cookieSecure: values.COOKIE_SECURE ?? publicUrl.startsWith('https:'),
    trustedProxies: values.TRUSTED_PROXIES,
    demo: values.DEMO,
    adminEmail: values.ADMIN_EMAIL?.toLowerCase() ?? null,
  };
}

/** Parses the environment and reads the secrets of the data folder, making them on first use. */
export function loadConfig(variables: Readonly<Record<string, string | undefined>>): Config {
  const environment = parseEnvironment(variables);
  return { ...environment, secrets: loadSecrets(environment.dataDirectory) };
}

/** 0.0.0.0 and :: mean "every interface"; nobody can type them into a browser everywhere. */
function displayHost(host: string): string {
  if (host === '0.0.0.0' || host === '::') return 'localhost';
  return host.includes(':') ? `[${host}]` : host;
}
