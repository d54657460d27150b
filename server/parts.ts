/** Makes the application's parts from the configuration; used by main.ts, worker.ts, the seed and tests. */
import { pino } from 'pino';
import type { Config } from './config.ts';
import { openDatabase } from './db/database.ts';
import { databaseQueue } from './jobs/queue.ts';
import { openDemoInbox } from './mail/demo-inbox.ts';
import { smtpMailer } from './mail/smtp-mailer.ts';
import { openIsolated } from './reading/isolated.ts';
import type { App } from './services/context.ts';
import { diskStorage } from './storage/disk-storage.ts';

/** Nobody listens there: without SMTP and without the demo's inbox a letter fails with a clear error. */
const noSmtp = 'smtp://127.0.0.1:1';

export async function openParts(config: Config): Promise<App & { close(): Promise<void> }> {
  const log = pino({ level: config.logLevel });
  const db = openDatabase(config.databaseUrl);
  const inbox = config.demo && !config.smtp ? await openDemoInbox() : null;
  const mailer = smtpMailer(inbox?.url ?? config.smtp ?? noSmtp, config.mailFrom);
  const storage = await diskStorage(config.storage);
  return {
    config, db, storage, mailer, inbox, log, queue: databaseQueue(), reader: { open: (files) => openIsolated(files) },
    async close() {
      await mailer.close();
      await inbox?.close();
      await db.$client.end();
    },
  };
}
