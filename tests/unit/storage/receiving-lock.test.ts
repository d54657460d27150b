import { setTimeout as wait } from 'node:timers/promises';
import { describe, expect, it } from 'vitest';
import { ReceivingLock } from '../../../server/storage/receiving-lock.ts';

const { signal } = new AbortController();
const nothing = () => undefined;

describe('one connection at a time for each upload', () => {
  it('refuses a second one while the first is receiving, and leaves the first alone', async () => {
    const lock = new ReceivingLock();
    let asked = 0;
    const first = lock.newLock('a');
    await first.lock(signal, () => void asked++);
    await expect(lock.newLock('a').lock(signal, nothing)).rejects.toMatchObject({ code: 'upload-locked' });
    expect(asked).toBe(0);
    expect(lock.holds('a')).toBe(true);
    await first.unlock();
    expect(lock.holds('a')).toBe(false);
    await lock.newLock('a').lock(signal, nothing);
  });

  it('keeps uploads apart', async () => {
    const lock = new ReceivingLock();
    await lock.newLock('a').lock(signal, nothing);
    await lock.newLock('b').lock(signal, nothing);
    expect(lock.holds('a') && lock.holds('b')).toBe(true);
  });

  it('takes the lock of a connection that has gone silent, once that lets go', async () => {
    const lock = new ReceivingLock({ silence: 20, patience: 2000 });
    const dead = lock.newLock('a');
    await dead.lock(signal, () => void setTimeout(() => void dead.unlock(), 30));
    await wait(40);
    await lock.newLock('a').lock(signal, nothing);
    expect(lock.holds('a')).toBe(true);
  });

  it('does not take the lock of one that does not let go', async () => {
    const lock = new ReceivingLock({ silence: 10, patience: 30 });
    await lock.newLock('a').lock(signal, nothing);
    await wait(30);
    await expect(lock.newLock('a').lock(signal, nothing)).rejects.toMatchObject({ code: 'upload-locked' });
  });

  it('does not count a connection as silent that gives a sign', async () => {
    const lock = new ReceivingLock({ silence: 200, patience: 10 });
    await lock.newLock('a').lock(signal, nothing);
    for (let i = 0; i < 5; i++) {
      await wait(60);
      lock.sign('a');
    }
    await expect(lock.newLock('a').lock(signal, nothing)).rejects.toMatchObject({ code: 'upload-locked' });
    expect(lock.holds('a')).toBe(true);
  });

  it('an old holder that ends late does not free the lock of its successor', async () => {
    const lock = new ReceivingLock({ silence: 10, patience: 1000 });
    const old = lock.newLock('a');
    await old.lock(signal, () => old.unlock());
    await wait(20);
    await lock.newLock('a').lock(signal, nothing);
    await old.unlock();
    expect(lock.holds('a')).toBe(true);
  });
});
