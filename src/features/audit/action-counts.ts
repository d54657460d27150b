/** Entries reshaped by action: how many, by how many people, when last. */
import { desc, op, table } from 'arquero';
import type { AuditEntry } from '#contract/operation.ts';

export interface ActionCount {
  action: string;
  entries: number;
  people: number;
  last: string;
}

export function countByAction(entries: Pick<AuditEntry, 'action' | 'actor' | 'at'>[]): ActionCount[] {
  return table({ action: entries.map((entry) => entry.action), actor: entries.map((entry) => entry.actor?.id ?? ''), at: entries.map((entry) => entry.at) })
    .groupby('action')
    .rollup({ entries: op.count(), people: op.distinct('actor'), last: op.max('at') })
    .orderby(desc('entries'), 'action')
    .objects() as ActionCount[];
}
