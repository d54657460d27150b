/** Colours of the theme for drawing on a canvas. */
export interface Ink {
  paper: string; sheet: string; ink: string; soft: string; rule: string; strong: string; brass: string; deep: string; verdigris: string; oxide: string; amber: string; wash: string;
}

export function readInk(): Ink {
  const style = getComputedStyle(document.documentElement);
  const colour = (name: string) => style.getPropertyValue(`--${name}`).trim() || '#000';
  return { paper: colour('paper'), sheet: colour('sheet'), ink: colour('ink'), soft: colour('ink-soft'), rule: colour('rule'), strong: colour('rule-strong'), brass: colour('brass'), deep: colour('brass-deep'), verdigris: colour('verdigris'), oxide: colour('oxide'), amber: colour('amber'), wash: colour('brass-wash') };
}
