/** npm start: from a fresh clone, or after any change, to a running Pennyweight. */
import { announce } from './announce.js';
import { answers, choosePort, demoAccounts, openApplicationDatabase, runStep, settings } from './application.js';
import { ensureBuilt } from './build.js';
import { interrupted, interruption } from './interruption.js';
import { ensureNodePackages } from './node-packages.js';
import { holdSession } from './session.js';
import { endAll, endOrphans, keepRunning } from './supervisor.js';

const host = process.env.HOST || '127.0.0.1';

await holdSession(async ({ state, onClose }) => {
  await ensureNodePackages();
  await endOrphans();
  const database = await openApplicationDatabase('npm start');
  onClose(database.close);
  await ensureBuilt();

  const port = await choosePort(host);
  const shown = ['0.0.0.0', '::'].includes(host) ? 'localhost' : host;
  const env = () => settings({ databaseUrl: database.url(), host, port, url: `http://${shown}:${port}` });
  const url = env().PENNYWEIGHT_URL;
  await runStep('migrate', ['dist/server/db/migrate.js'], env());
  const seeded = env().PENNYWEIGHT_DEMO === '0' ? '' : await runStep('demo', ['dist/server/demo/seed.js'], env());

  onClose(endAll);
  const processes = [
    keepRunning({ name: 'web', args: ['--enable-source-maps', 'dist/server/main.js'], env }),
    keepRunning({ name: 'worker', args: ['--enable-source-maps', 'dist/server/worker.js'], env }),
  ];
  if (await answers(host, port)) {
    state.url = url;
    announce('running', `Pennyweight runs at ${url} - press Ctrl+C to stop it. Logs: storage/logs`);
    const accounts = demoAccounts(seeded, env());
    if (accounts) process.stdout.write(`\n${accounts}\n`);
  }
  await interrupted();
  if (interruption.reason === 'gave up') process.exitCode = 1;
  else announce('stopping', `${interruption.reason}: ending the application and its database`);
  await endAll();
  await Promise.all(processes);
});
