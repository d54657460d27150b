/** Runs a few lines of Debian's Python with NumPy and SciPy; JSON in, JSON out. */
import { execFileSync } from 'node:child_process';

export function python<T>(code: string, input: unknown): T {
  const program = `import json, sys\nimport numpy as np\ngiven = json.load(sys.stdin)\n${code}\n`;
  return JSON.parse(execFileSync('/usr/bin/python3', ['-c', program], { input: JSON.stringify(input), maxBuffer: 1 << 28, encoding: 'utf8' })) as T;
}
