import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { askHolder, claim, exclusively } from '../../../server/setup/exclusive.js';

const purpose = `test-${process.pid}`;

describe('a lock', () => {
  it('is given to one and says who has it', async () => {
    const lock = await claim(purpose, () => 'the first');
    expect(await claim(purpose)).toBeNull();
    expect(await askHolder(purpose)).toBe('the first');
    await lock.release();
    const again = await claim(purpose);
    expect(again).not.toBeNull();
    await again.release();
    expect(await askHolder(purpose)).toBe('');
  });

  it('lets one work at a time, also after a failure', async () => {
    let inside = 0;
    let most = 0;
    const work = async () => {
      inside += 1;
      most = Math.max(most, inside);
      await new Promise((resolve) => setTimeout(resolve, 20));
      inside -= 1;
    };
    const failing = async () => {
      await work();
      throw new RangeError('of the work');
    };
    const results = await Promise.allSettled(
      [work, failing, work, work].map((each) => exclusively(`${purpose}-many`, each)),
    );
    expect(results.map(({ status }) => status)).toEqual(['fulfilled', 'rejected', 'fulfilled', 'fulfilled']);
    expect(most).toBe(1);
  });

  it('is given back by the kernel when its process is killed', async () => {
    const module = fileURLToPath(new URL('../../../server/setup/exclusive.js', import.meta.url));
    const script = `import { claim } from ${JSON.stringify(module)};
      await claim('${purpose}-killed'); console.log('held'); setTimeout(() => {}, 60000);`;
    const child = spawn(process.execPath, ['--input-type=module', '-e', script]);
    await once(child.stdout, 'data');
    expect(await claim(`${purpose}-killed`)).toBeNull();
    child.kill('SIGKILL');
    await once(child, 'close');
    const lock = await claim(`${purpose}-killed`);
    expect(lock).not.toBeNull();
    await lock.release();
  });
});
