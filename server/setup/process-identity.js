/** Tells a process from a later one with the same number, by the time it was started (field 22 of proc(5) stat). */
import { readFileSync } from 'node:fs';

export function startedAt(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The second field is the program's name in brackets and may itself hold blanks and brackets.
    const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
    return fields[0] === 'Z' ? null : fields[19];
  } catch {
    return null;
  }
}

export function identify(pid = process.pid) {
  return { pid, started: startedAt(pid) };
}

export function isAlive({ pid, started }) {
  return started !== null && startedAt(pid) === started;
}

export function commandLine(pid) {
  try {
    return readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0').filter(Boolean);
  } catch {
    return null;
  }
}
