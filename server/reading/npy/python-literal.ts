/**
 * The part of Python's literals that an NPY header uses: dict, tuple, list, string, whole number, True, False, None.
 * A parser of its own, so that no header is ever evaluated. Grammar: Python 3 Language Reference, 2.4 and 6.2.
 */
import { PennyweightError } from '#contract/error.ts';

export type Literal = string | number | boolean | null | Literal[] | Map<string, Literal>;

const deepest = 16;

export function parseLiteral(text: string): Literal {
  let at = 0;

  function refuse(expected: string): PennyweightError {
    const found = at < text.length ? JSON.stringify(text.slice(at, at + 12)) : 'its end';
    return new PennyweightError('file-unreadable', `the NPY header has ${found} at character ${at} where ${expected} is expected; upload the file again.`, {
      position: at,
      expected,
    });
  }
  function skipSpace(): void {
    while (at < text.length && ' \t\r\n\f\0'.includes(text[at])) at++;
  }
  function take(letter: string): boolean {
    skipSpace();
    if (text[at] !== letter) return false;
    at++;
    return true;
  }
  function need(letter: string): void {
    if (!take(letter)) throw refuse(`'${letter}'`);
  }

  function parseString(): string {
    const quote = text[at++];
    let value = '';
    while (at < text.length && text[at] !== quote) {
      if (text[at] === '\n') throw refuse('the rest of a string');
      if (text[at] === '\\') {
        at++;
        if (text[at] !== quote && text[at] !== '\\') throw refuse('a plain character');
      }
      value += text[at++];
    }
    if (at >= text.length) throw refuse('the end of a string');
    at++;
    return value;
  }

  function parseItems(end: string, depth: number): { items: Literal[]; commas: number } {
    const items: Literal[] = [];
    let commas = 0;
    while (!take(end)) {
      items.push(parseValue(depth + 1));
      if (take(',')) commas++;
      else {
        need(end);
        break;
      }
    }
    return { items, commas };
  }

  function parseDict(depth: number): Map<string, Literal> {
    const dict = new Map<string, Literal>();
    while (!take('}')) {
      skipSpace();
      if (text[at] !== "'" && text[at] !== '"') throw refuse('a key in quotes');
      const key = parseString();
      if (dict.has(key)) throw refuse(`no second '${key}'`);
      need(':');
      dict.set(key, parseValue(depth + 1));
      if (!take(',')) {
        need('}');
        break;
      }
    }
    return dict;
  }

  function parseValue(depth: number): Literal {
    if (depth > deepest) throw refuse('a header that is not nested this deep');
    skipSpace();
    const letter = text[at];
    if (letter === "'" || letter === '"') return parseString();
    if (take('{')) return parseDict(depth);
    if (take('[')) return parseItems(']', depth).items;
    if (take('(')) {
      const { items, commas } = parseItems(')', depth);
      // (5) is 5 in brackets, (5,) is a tuple.
      return items.length === 1 && commas === 0 ? items[0] : items;
    }
    // A trailing L is Python 2's mark of a long integer.
    const word = /^(True|False|None|[+-]?\d{1,20}(?=L?\b))L?/.exec(text.slice(at, at + 24))?.[0];
    if (word === undefined) throw refuse('a value');
    at += word.length;
    if (word === 'True') return true;
    if (word === 'False') return false;
    if (word === 'None') return null;
    return Number(word.replace('L', ''));
  }

  const value = parseValue(0);
  skipSpace();
  if (at < text.length) throw refuse('the end of the header');
  return value;
}
