/** The web server. */
import { once } from 'node:events';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { createApp } from './app.ts';
import { readConfig } from './config.ts';
import { openParts } from './parts.ts';
import { closeReaders } from './services/reading-pool.ts';

const config = readConfig(process.env);
const parts = await openParts(config);
const server = createServer(createApp(parts));
// Uploads of many gigabytes on slow lines: only the head of a request is limited in time.
server.requestTimeout = 0;
server.headersTimeout = 30_000;
server.listen(config.port, config.host);
await once(server, 'listening');
parts.log.info({ url: config.url, port: (server.address() as AddressInfo).port }, 'listening');

let stopping = false;
async function stop(): Promise<void> {
  if (stopping) return;
  stopping = true;
  const closed = once(server, 'close');
  server.close();
  server.closeIdleConnections();
  setTimeout(() => server.closeAllConnections(), 3000).unref();
  await closed;
  await closeReaders();
  await parts.close();
  process.exit(0);
}
process.on('SIGTERM', () => void stop());
process.on('SIGINT', () => void stop());
