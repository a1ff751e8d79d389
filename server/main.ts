import { mkdirSync } from 'node:fs';
import { createServer, type Server } from 'node:http';
import { join } from 'node:path';
import { pino } from 'pino';
import { openDatabase } from '@drizzle/client';
import { firstAdministratorLink } from './accounts/accounts-routes';
import { dropOldGuesses } from './accounts/guesses';
import { linkWith, makeToken, type TokenKind } from './accounts/tokens';
import { createApp } from './app';
import { readConfig, type Config } from './config';
import { databaseName, filesName, systemClock, type Context } from './context';
import { createFileStore } from './files/file-store';
import { createKeyPool } from './keys';
import { createLive } from './live/live';
import { leaveJobs, workJobs } from './jobs/work-jobs';
import { sweepHolds } from './marking/marking-routes';
import { openReceiptKey } from './receipts/receipt-key';
import { runClockStages } from './sets/run-clock-stages';
import { sendDueLetters, smtpTransport } from './mail/post-office';

/** How often the clock's own work is looked at, in milliseconds. */
const heartbeat = 2_000;

async function main(): Promise<void> {
  const config = readConfig(process.env);
  mkdirSync(config.dataDir, { recursive: true });
  openReceiptKey(config.dataDir);
  const log = pino({ level: config.logLevel, base: null });
  const keys = createKeyPool({});
  const live = createLive();
  const parts = { config, clock: systemClock, keys, live, log };
  if (config.demo) await showDemonstrationLoading(parts);
  const database = openDatabase(join(config.dataDir, databaseName), 'migrations');
  const files = createFileStore(join(config.dataDir, filesName));
  const context: Context = { ...parts, db: database.db, files };

  const { app, sessions } = createApp(context, 'dist/client/browser');
  const server = createServer(app);
  live.attach(server, context, async (cookie) => (await sessions.read(cookie)).person);

  await listen(server, config);
  await announce(context, config);

  const transport = config.smtpUrl ? smtpTransport(config.smtpUrl, config.mailFrom) : null;
  let busy = false;
  const beat = setInterval(() => {
    if (busy) return;
    busy = true;
    void onBeat(context, transport)
      .catch((error: unknown) => {
        log.error({ error: String(error) }, 'regular work failed');
      })
      .finally(() => {
        busy = false;
      });
  }, heartbeat);

  let stopping = false;
  const stop = (): void => {
    if (stopping) return;
    stopping = true;
    clearInterval(beat);
    leaveJobs(context);
    live.close();
    server.closeIdleConnections();
    server.close(() => {
      void keys.close().finally(() => {
        database.close();
        process.exit(0);
      });
    });
    // Requests under way are waited for, but not for ever.
    setTimeout(() => {
      process.exit(0);
    }, 8_000).unref();
  };
  process.on('SIGINT', stop);
  process.on('SIGTERM', stop);
}

function listen(server: Server, { port, host }: Config): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', (error: NodeJS.ErrnoException) => {
      reject(
        error.code === 'EADDRINUSE'
          ? new Error(
              `Port ${String(port)} is in use by another program. Choose another one, for example: PORT=4400 npm start`,
            )
          : error,
      );
    });
    server.listen(port, host, resolve);
  });
}

async function onBeat(context: Context, transport: ReturnType<typeof smtpTransport> | null): Promise<void> {
  dropOldGuesses(context.db, context.clock.now());
  sweepHolds(context);
  void workJobs(context);
  await runClockStages(context);
  await sendDueLetters(context, transport, (kind, userId) =>
    linkWith(context.config.origin, makeToken(context.db, kind as TokenKind, userId, context.clock.now()).secret),
  );
}

/** Loads the demonstration into an empty data folder, on one line that says how far it is. */
async function showDemonstrationLoading(parts: Omit<Context, 'db' | 'files'>): Promise<void> {
  const { fillDataFolder } = await import('../demo/fill-data-folder');
  const terminal = process.stdout.isTTY;
  let toldAt = 0;
  const tell = (line: string): void => {
    // A terminal shows one line that changes; elsewhere a line every few seconds is enough.
    if (terminal) process.stdout.write(`\r${line}\u001b[K`);
    else if (Date.now() - toldAt > 3_000) {
      toldAt = Date.now();
      process.stdout.write(`${line}\n`);
    }
  };
  if ((await fillDataFolder(parts, tell)) && terminal) process.stdout.write('\n');
}

async function announce(context: Context, config: Config): Promise<void> {
  const lines = [`Halfsilver is at ${config.origin}`];
  const link = firstAdministratorLink(context);
  if (link) lines.push('', 'There is no administrator yet. This link makes one; it works once and lasts a day:', link);
  if (config.demo) {
    const { demonstrationAccounts } = await import('../demo/accounts');
    lines.push('', 'The demonstration’s accounts:');
    lines.push(
      ...demonstrationAccounts.map(
        ({ email, password, role }) => `  ${role.padEnd(14)} ${email.padEnd(34)} ${password}`,
      ),
    );
  }
  lines.push('', 'Ctrl-C stops it.');
  process.stdout.write(`${lines.join('\n')}\n`);
}

main().catch((error: unknown) => {
  process.stderr.write(`${error instanceof Error ? error.message : String(error)}\n`);
  process.exit(1);
});
