import { z } from 'zod';

const flag = z.enum(['on', 'off']);

const variables = z.object({
  PORT: z.coerce.number().int().min(0).max(65535).default(4300),
  HOST: z.string().default('127.0.0.1'),
  DATA_DIR: z.string().default('data'),
  DEMO: flag.default('on'),
  ORIGIN: z.url().optional(),
  SMTP_URL: z.string().optional(),
  MAIL_FROM: z.string().default('Halfsilver <halfsilver@localhost>'),
  LOG_LEVEL: z.enum(['silent', 'fatal', 'error', 'warn', 'info', 'debug']).default('info'),
  TRUST_PROXY: z.coerce.number().int().min(0).max(4).default(0),
  INSTITUTION: z.string().default(''),
  NODE_ENV: z.enum(['development', 'test', 'production']).default('production'),
});

/** The installation's configuration. Every variable is listed in `.env.example`. */
export interface Config {
  readonly port: number;
  readonly host: string;
  readonly dataDir: string;
  /** Whether an empty database is filled with the demonstration course. */
  readonly demo: boolean;
  /** The address that people use, for example `https://halfsilver.example.org`. */
  readonly origin: string;
  /** Absent: letters stay in the local outbox. */
  readonly smtpUrl: string | undefined;
  readonly mailFrom: string;
  readonly logLevel: string;
  /** How many reverse proxies stand in front. */
  readonly trustProxy: number;
  /** Whether cookies are sent over HTTPS only. */
  readonly secureCookies: boolean;
  /** Printed on the sign-in page; may be empty. */
  readonly institution: string;
  /** Responses are checked against their schema outside production. */
  readonly checkResponses: boolean;
}

/**
 * Reads the configuration from environment variables, once.
 *
 * @throws Error with one line for each variable that is wrong
 */
export function readConfig(environment: Readonly<Record<string, string | undefined>>): Config {
  const parsed = variables.safeParse(
    Object.fromEntries(Object.entries(environment).filter(([, value]) => value !== undefined && value !== '')),
  );
  if (!parsed.success) {
    const lines = parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`);
    throw new Error(`The configuration cannot be used.\n${lines.join('\n')}`);
  }
  const given = parsed.data;
  const origin = (given.ORIGIN ?? `http://localhost:${String(given.PORT)}`).replace(/\/$/, '');
  return {
    port: given.PORT,
    host: given.HOST,
    dataDir: given.DATA_DIR,
    demo: given.DEMO === 'on',
    origin,
    smtpUrl: given.SMTP_URL,
    mailFrom: given.MAIL_FROM,
    logLevel: given.LOG_LEVEL,
    trustProxy: given.TRUST_PROXY,
    secureCookies: origin.startsWith('https:'),
    institution: given.INSTITUTION,
    checkResponses: given.NODE_ENV !== 'production',
  };
}
