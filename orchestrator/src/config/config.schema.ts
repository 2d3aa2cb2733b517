import { resolve } from 'node:path';
import { isPath } from '@cresthold/adapters';
import { z } from 'zod';

const port = z.coerce.number().int().min(0).max(65_535);

/** The parts of a comma-separated text. */
function listed(text: string): string[] {
  return text
    .split(',')
    .map((part) => part.trim())
    .filter((part) => part !== '');
}

const addresses = z.string().transform(listed).pipe(z.array(z.email()));

/** What the environment may set; every name begins with CRESTHOLD_. */
const environmentSchema = z.object({
  CRESTHOLD_DATA: z.string().min(1).default('data'),
  CRESTHOLD_PORT: port.default(4380),
  CRESTHOLD_HOST: z.string().min(1).default('127.0.0.1'),
  CRESTHOLD_CONSOLE: z.string().min(1).optional(),
  CRESTHOLD_HTTPS: z.enum(['on', 'off']).default('off'),
  CRESTHOLD_PROXIES: z.coerce.number().int().min(0).max(10).default(0),
  CRESTHOLD_SMTP_URL: z.url({ protocol: /^smtps?$/ }).optional(),
  CRESTHOLD_MAIL_FROM: z.email().optional(),
  CRESTHOLD_MAIL_TO: addresses.default([]),
  CRESTHOLD_SESSION_IDLE_MINUTES: z.coerce.number().min(1).max(1440).default(30),
  CRESTHOLD_SESSION_HOURS: z.coerce.number().min(0.1).max(24).default(12),
  CRESTHOLD_SECOND_FACTOR: z.enum(['optional', 'approvers']).default('optional'),
  CRESTHOLD_STATION: z.string().trim().max(200).default(''),
  CRESTHOLD_PLUGINS: z.string().transform(listed).default([]),
});

/** The mail server and who hears of a trip. */
export interface MailConfig {
  smtpUrl: string;
  from: string;
  tripRecipients: string[];
}

/** The configuration of one server. */
export interface Config {
  /** Folder of database, run files and secret; absolute. */
  dataFolder: string;
  /** 0 takes any free port. */
  port: number;
  host: string;
  /** Folder of the built console; absolute. */
  consoleFolder: string;
  /** True where people reach the server over HTTPS: the session cookie is then marked Secure. */
  isHttps: boolean;
  /** Number of reverse proxies in front whose X-Forwarded-For is believed. */
  proxies: number;
  /** Null where no mail is to be sent. */
  mail: MailConfig | null;
  /** Without an act of the person a session ends after this long, s. */
  sessionIdleS: number;
  /** A session ends this long after sign-in, s. */
  sessionMaxS: number;
  /** True where whoever approves envelopes or resets trips must have a second factor. */
  isSecondFactorNeeded: boolean;
  /** Name of the station; no word of it may make a password. */
  station: string;
  /** Adapters from outside: absolute paths of folders or files, or names of installed packages. */
  plugIns: string[];
}

/** All faults of the environment at once, one a line. */
export class ConfigError extends Error {
  constructor(readonly faults: readonly string[]) {
    super(`The configuration has faults:\n${faults.map((fault) => `  ${fault}`).join('\n')}`);
    this.name = 'ConfigError';
  }
}

/**
 * Reads the configuration from environment variables.
 *
 * @param defaultConsoleFolder used where CRESTHOLD_CONSOLE is not set
 * @throws ConfigError naming every variable at fault
 */
export function parseConfig(environment: NodeJS.ProcessEnv, defaultConsoleFolder: string): Config {
  const outcome = environmentSchema.safeParse(withoutEmpty(environment));
  const faults = outcome.success
    ? mailFaults(outcome.data)
    : outcome.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
  if (!outcome.success || faults.length > 0) throw new ConfigError(faults);
  const env = outcome.data;
  return {
    dataFolder: resolve(env.CRESTHOLD_DATA),
    port: env.CRESTHOLD_PORT,
    host: env.CRESTHOLD_HOST,
    consoleFolder: resolve(env.CRESTHOLD_CONSOLE ?? defaultConsoleFolder),
    isHttps: env.CRESTHOLD_HTTPS === 'on',
    proxies: env.CRESTHOLD_PROXIES,
    mail: mailOf(env),
    sessionIdleS: env.CRESTHOLD_SESSION_IDLE_MINUTES * 60,
    sessionMaxS: env.CRESTHOLD_SESSION_HOURS * 3600,
    isSecondFactorNeeded: env.CRESTHOLD_SECOND_FACTOR === 'approvers',
    station: env.CRESTHOLD_STATION,
    plugIns: env.CRESTHOLD_PLUGINS.map((plugIn) => (isPath(plugIn) ? resolve(plugIn) : plugIn)),
  };
}

type Environment = z.infer<typeof environmentSchema>;

/** A variable set to nothing counts as not set. */
function withoutEmpty(environment: NodeJS.ProcessEnv): Record<string, string | undefined> {
  return Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== ''));
}

function mailFaults(env: Environment): string[] {
  if (env.CRESTHOLD_SMTP_URL === undefined) return [];
  const faults: string[] = [];
  if (env.CRESTHOLD_MAIL_FROM === undefined) {
    faults.push('CRESTHOLD_MAIL_FROM: give the sender, since CRESTHOLD_SMTP_URL is set.');
  }
  if (env.CRESTHOLD_MAIL_TO.length === 0) {
    faults.push('CRESTHOLD_MAIL_TO: give who hears of a trip, since CRESTHOLD_SMTP_URL is set.');
  }
  return faults;
}

function mailOf(env: Environment): MailConfig | null {
  if (env.CRESTHOLD_SMTP_URL === undefined || env.CRESTHOLD_MAIL_FROM === undefined) return null;
  return {
    smtpUrl: env.CRESTHOLD_SMTP_URL,
    from: env.CRESTHOLD_MAIL_FROM,
    tripRecipients: env.CRESTHOLD_MAIL_TO,
  };
}
