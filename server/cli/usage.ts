/** Wrong usage: the sentence goes to standard error with a hint to --help, and the exit status is 64. */
import { parseArgs, type ParseArgsConfig } from 'node:util';
import { PennyweightError } from '#contract/error.ts';

const usageMark = 'usage';

export function wrongUsage(message: string): PennyweightError {
  return new PennyweightError('invalid-input', message, { [usageMark]: true });
}

export function isWrongUsage(error: unknown): error is PennyweightError {
  return error instanceof PennyweightError && error.details[usageMark] === true;
}

/** "--time-start -1" is meant as a value, which parseArgs takes only as "--time-start=-1". */
function withNegativeNumbers(args: string[], options: NonNullable<ParseArgsConfig['options']>): string[] {
  const joined: string[] = [];
  for (let i = 0; i < args.length; i++) {
    const option = args[i].startsWith('--') ? options[args[i].slice(2)] : undefined;
    if (option?.type === 'string' && /^-[\d.]/.test(args[i + 1] ?? '')) joined.push(`${args[i]}=${args[++i]}`);
    else joined.push(args[i]);
  }
  return joined;
}

/** node:util's parseArgs, whose refusals are wrong usage. */
export function parseArguments<T extends NonNullable<ParseArgsConfig['options']>>(args: string[], options: T) {
  try {
    return parseArgs({ args: withNegativeNumbers(args, options), options, allowPositionals: true, strict: true });
  } catch (cause) {
    const code = (cause as { code?: unknown }).code;
    if (typeof code === 'string' && code.startsWith('ERR_PARSE_ARGS'))
      throw wrongUsage((cause as Error).message.split('. To specify')[0].replace(/\.?$/, '.'));
    throw cause;
  }
}

export function parseNumber(option: string, text: string): number {
  const value = text.trim() === '' ? NaN : Number(text);
  if (!Number.isFinite(value)) throw wrongUsage(`${option} takes a number, not "${text}".`);
  return value;
}

export function parseCount(option: string, text: string): number {
  const value = parseNumber(option, text);
  if (!Number.isInteger(value) || value < 1)
    throw wrongUsage(`${option} takes a whole number from 1 on, not "${text}".`);
  return value;
}
