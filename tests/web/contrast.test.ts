/** WCAG 2.2: relative luminance and contrast ratio; 4.5:1 for text (1.4.3), 3:1 for graphics (1.4.11). */
import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

const css = readFileSync('src/app/theme.css', 'utf8');

function tokens(selector: string): Record<string, string> {
  const block = css.slice(css.indexOf(`\n${selector} {`)).match(/\{([^}]*)\}/)![1];
  return Object.fromEntries([...block.matchAll(/--([a-z-]+):\s*(#[0-9a-f]{6});/g)].map(([, name, value]) => [name, value]));
}

function luminance(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => {
    const c = Number.parseInt(hex.slice(at, at + 2), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  });
  return 0.2126 * r + 0.7152 * g + 0.0722 * b;
}

function contrast(a: string, b: string): number {
  const [light, dark] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (light + 0.05) / (dark + 0.05);
}

it('computes contrast as the standard does', () => {
  expect(contrast('#ffffff', '#000000')).toBeCloseTo(21, 10);
  expect(contrast('#767676', '#ffffff')).toBeCloseTo(4.54, 2);
});

describe.each([['light', ':root'], ['dark', ":root[data-theme='dark']"]])('the %s theme', (_name, selector) => {
  const colour = tokens(selector);
  const grounds = ['paper', 'paper-raised'];

  it.each(['ink', 'ink-soft', 'brass-deep', 'verdigris', 'oxide', 'amber'].flatMap((text) => grounds.map((ground) => [text, ground])))('%s can be read on %s', (text, ground) => {
    expect(contrast(colour[text], colour[ground])).toBeGreaterThanOrEqual(4.5);
  });
  it.each(['ink', 'ink-soft', 'brass-deep', 'verdigris', 'oxide'])('%s can be read on the wash of what is chosen', (text) => {
    expect(contrast(colour[text], colour['brass-wash'])).toBeGreaterThanOrEqual(4.5);
  });
  it.each(['ink', 'brass-deep', 'oxide'])('paper can be read on a button of %s', (ground) => {
    expect(contrast(colour.paper, colour[ground])).toBeGreaterThanOrEqual(4.5);
  });
  it.each(['brass', 'rule-strong', 'train', 'validation', 'test'].flatMap((mark) => grounds.map((ground) => [mark, ground])))('%s stands out on %s', (mark, ground) => {
    expect(contrast(colour[mark], colour[ground])).toBeGreaterThanOrEqual(3);
  });
});
