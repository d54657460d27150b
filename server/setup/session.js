/** One application at a time in a checkout: the frame around npm start and npm run dev. */
import { announce } from './announce.js';
import { checkout, prepareStorage } from './checkout.js';
import { askHolder, claim } from './exclusive.js';
import { interruption, listenForInterruption } from './interruption.js';
import { checkNodeVersion } from './node-version.js';
import { explain } from './refusal.js';

/** Runs `work`, which may say where it can be found; closes what it opened, whatever happens. */
export async function holdSession(work) {
  const closers = [];
  const state = { url: null };
  try {
    checkNodeVersion();
    listenForInterruption();
    prepareStorage();
    const session = await claim('session', () => JSON.stringify({ pid: process.pid, url: state.url }));
    if (session === null) {
      const other = JSON.parse((await askHolder('session')) || '{}');
      const where = other.url ? `runs at ${other.url}` : 'is being started';
      announce(
        'already',
        `Pennyweight ${where} from ${checkout} (process ${other.pid}). End that one first to start anew.`,
      );
      return;
    }
    closers.push(session.release);
    await work({ state, onClose: (close) => closers.push(close) });
  } catch (error) {
    if (interruption.aborted) {
      announce('stopped', `by ${interruption.reason} before Pennyweight was running`);
    } else {
      process.stderr.write(`\n${explain(error)}\n`);
      process.exitCode = 1;
    }
  } finally {
    for (const close of closers.reverse()) {
      await close().catch((error) => {
        process.stderr.write(`${explain(error)}\n`);
        process.exitCode = 1;
      });
    }
  }
}
