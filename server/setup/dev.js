/** npm run dev: the application from its sources, restarted and reloaded as they change. */
import { announce } from './announce.js';
import { choosePort, demoAccounts, openApplicationDatabase, runStep, settings } from './application.js';
import { nextFreePort } from './free-port.js';
import { interrupted } from './interruption.js';
import { ensureNodePackages } from './node-packages.js';
import { holdSession } from './session.js';
import { endAll, endOrphans, keepRunning } from './supervisor.js';

const host = '127.0.0.1';
const tsx = 'node_modules/tsx/dist/cli.mjs';

await holdSession(async ({ state, onClose }) => {
  await ensureNodePackages();
  await endOrphans();
  const database = await openApplicationDatabase('npm run dev');
  onClose(database.close);

  const port = await choosePort(host);
  const pagesPort = await nextFreePort(5173, host);
  // The pages come from Vite, which passes /api on to PORT: that is the address the application has for a browser.
  const url = `http://${host}:${pagesPort}`;
  const env = () => settings({ databaseUrl: database.url(), host, port, url });
  await runStep('migrate', ['--import', 'tsx', 'server/db/migrate.ts'], env());
  const seeded =
    env().PENNYWEIGHT_DEMO === '0' ? '' : await runStep('demo', ['--import', 'tsx', 'server/demo/seed.ts'], env());

  onClose(endAll);
  const vite = ['node_modules/vite/bin/vite.js', '--host', host, '--port', String(pagesPort), '--strictPort'];
  const processes = [
    keepRunning({ name: 'web', args: [tsx, 'watch', '--clear-screen=false', 'server/main.ts'], env, echo: true }),
    keepRunning({ name: 'worker', args: [tsx, 'watch', '--clear-screen=false', 'server/worker.ts'], env, echo: true }),
    keepRunning({ name: 'pages', args: vite, env, echo: true }),
  ];
  state.url = url;
  announce('running', `pages at ${url}, server at http://${host}:${port} - press Ctrl+C to stop`);
  const accounts = demoAccounts(seeded, env());
  if (accounts) process.stdout.write(`\n${accounts}\n`);
  await interrupted();
  await endAll();
  await Promise.all(processes);
});
