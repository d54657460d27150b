import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { createServer } from 'node:net';
import { describe, expect, it } from 'vitest';
import { isFree, nextFreePort, randomFreePort } from '../../../server/setup/free-port.js';
import { checkNodeVersion } from '../../../server/setup/node-version.js';
import { identify, isAlive } from '../../../server/setup/process-identity.js';

describe('the version of Node.js', () => {
  it.each(['20.19.0', '20.20.2', '22.0.0', '24.1.0'])('%s is enough', (version) => {
    expect(() => checkNodeVersion(version)).not.toThrow();
  });
  it.each(['18.20.8', '20.18.3', '20.0.0'])('%s is refused with what to do', (version) => {
    expect(() => checkNodeVersion(version)).toThrow(`20.19 or newer and this is ${version}: install`);
  });
});

describe('ports', () => {
  it('that are taken are passed over', async () => {
    const server = createServer().listen(0, '127.0.0.1');
    await once(server, 'listening');
    const { port } = server.address();
    try {
      expect(await isFree(port)).toBe(false);
      expect(await nextFreePort(port, '127.0.0.1')).toBeGreaterThan(port);
    } finally {
      server.close();
    }
  });

  it('of all addresses are taken on the loopback too', async () => {
    const server = createServer().listen(0, '0.0.0.0');
    await once(server, 'listening');
    try {
      expect(await isFree(server.address().port)).toBe(false);
    } finally {
      server.close();
    }
  });

  it('chosen at random lie below those of outgoing connections', async () => {
    const port = await randomFreePort();
    expect(port).toBeGreaterThanOrEqual(20000);
    expect(port).toBeLessThan(32768);
  });
});

describe('a process', () => {
  it('is known by its start, not by its number alone', async () => {
    const child = spawn(process.execPath, ['-e', 'setTimeout(() => {}, 60000)']);
    await once(child, 'spawn');
    const identity = identify(child.pid);
    expect(isAlive(identity)).toBe(true);
    expect(isAlive({ ...identity, started: String(Number(identity.started) - 1) })).toBe(false);
    child.kill('SIGKILL');
    await once(child, 'close');
    expect(isAlive(identity)).toBe(false);
  });
});
