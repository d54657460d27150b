/** Results go to standard output, messages to standard error, and a progress bar only where a person sees it. */
export interface Terminal {
  result(text: string): void;
  message(text: string): void;
  /** share from 0 to 1; null ends the bar */
  progress(label: string, share: number | null): void;
}

const barWidth = 24;

export function processTerminal(): Terminal {
  const { stdout, stderr } = process;
  let drawn = '';
  const clear = () => {
    if (drawn) stderr.write('\r\x1b[K');
    drawn = '';
  };
  return {
    result: (text) => {
      clear();
      stdout.write(text.endsWith('\n') ? text : `${text}\n`);
    },
    message: (text) => {
      clear();
      stderr.write(`${text}\n`);
    },
    progress: (label, share) => {
      if (!stderr.isTTY) return;
      if (share === null) return clear();
      const filled = Math.round(barWidth * Math.min(1, Math.max(0, share)));
      const line = `${label} ${'█'.repeat(filled)}${'░'.repeat(barWidth - filled)} ${Math.floor(100 * share)} %`;
      if (line === drawn) return;
      stderr.write(`\r\x1b[K${line}`);
      drawn = line;
    },
  };
}
