/**
 * Counts entries by action in a worker: arquero compiles its expressions with `new Function`, which the pages' security policy
 * forbids. The server gives this worker a policy of its own (server/app.ts): it may compile, and may reach nothing.
 */
import { countByAction } from './action-counts.ts';

self.onmessage = (event: MessageEvent) => {
  self.postMessage(countByAction(event.data));
};
