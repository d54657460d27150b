/** What the set-up tells the person in front of the terminal. */
export function announce(topic, text) {
  process.stdout.write(`${topic.padEnd(10)} ${text}\n`);
}

export function warn(topic, text) {
  process.stderr.write(`${topic.padEnd(10)} ${text}\n`);
}

export function seconds(since) {
  return `${((performance.now() - since) / 1000).toFixed(1)} s`;
}
