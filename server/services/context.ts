/** What every service function is given: the application's parts and who calls. */
import type { Logger } from 'pino';
import type { Action, Subject } from '#contract/access.ts';
import { about } from '#contract/access.ts';
import { PennyweightError } from '#contract/error.ts';
import type { Caller } from '../access/caller.ts';
import type { Config } from '../config.ts';
import type { Database } from '../db/database.ts';
import type { Queue } from '../jobs/queue.ts';
import type { Mailer } from '../mail/mailer.ts';
import type { DemoInbox } from '../mail/demo-inbox.ts';
import type { ObjectStorage } from '../storage/object-storage.ts';
import type { ArchiveReader } from './archive-reader.ts';

export interface App {
  config: Config;
  db: Database;
  storage: ObjectStorage;
  queue: Queue;
  mailer: Mailer;
  /** opens archives in the isolated reading process; wired by main.ts and worker.ts */
  reader: ArchiveReader;
  /** the demo's inbox; null outside demo mode and tests */
  inbox: DemoInbox | null;
  log: Logger;
}

/** Service functions are `(app: App, caller: Caller, input) => Promise<answer of the contract>`. */
export type { Caller };

/** Permission first: refuses with one sentence when the caller may not do that to this object. */
export function authorise(caller: Caller, action: Action, subject: Subject, facts: Record<string, unknown>): void {
  if (caller.ability.can(action, about(subject, facts))) return;
  if (caller.principal.token) {
    throw new PennyweightError('token-scope', `This token may not ${action} ${subject.toLowerCase()}: make one with the scope and campaign that this needs.`, { action, subject });
  }
  throw new PennyweightError('not-allowed', `Your role does not allow you to ${action} this ${subject.toLowerCase()}: ask an administrator of the campaign.`, { action, subject });
}

/**
 * Objects that the caller may not even read are not there: 'not-found', so that ids and slugs cannot be probed.
 * Token scope is told as such.
 */
export function mustSee(caller: Caller, subject: Subject, facts: Record<string, unknown>, what: string): void {
  if (caller.ability.can('read', about(subject, facts))) return;
  if (caller.principal.token) authorise(caller, 'read', subject, facts);
  throw new PennyweightError('not-found', `There is no ${what} here, or you are not a member of its campaign.`, {});
}
