/**
 * Perceptually uniform colour maps of our own, straight lines in OKLab (B. Ottosson, 2020): lightness grows evenly with the value.
 *   sequential  deep ink-blue through verdigris to pale brass
 *   diverging   oxide - paper - deep verdigris, lightest in the middle, symmetric in lightness
 */

type Lab = [number, number, number];

function oklabOf(hex: string): Lab {
  const channel = (k: number) => {
    const c = parseInt(hex.slice(1 + 2 * k, 3 + 2 * k), 16) / 255;
    return c <= 0.04045 ? c / 12.92 : ((c + 0.055) / 1.055) ** 2.4;
  };
  const [r, g, b] = [channel(0), channel(1), channel(2)];
  const l = Math.cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
  const m = Math.cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
  const s = Math.cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
  return [0.2104542553 * l + 0.793617785 * m - 0.0040720468 * s, 1.9779984951 * l - 2.428592205 * m + 0.4505937099 * s, 0.0259040371 * l + 0.7827717662 * m - 0.808675766 * s];
}

function rgbOf([L, a, b]: Lab): [number, number, number] {
  const l = (L + 0.3963377774 * a + 0.2158037573 * b) ** 3, m = (L - 0.1055613458 * a - 0.0638541728 * b) ** 3, s = (L - 0.0894841775 * a - 1.291485548 * b) ** 3;
  const linear = [4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s, -1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s, -0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s];
  return linear.map((c) => Math.round(255 * Math.min(1, Math.max(0, c <= 0.0031308 ? 12.92 * c : 1.055 * c ** (1 / 2.4) - 0.055)))) as [number, number, number];
}

/** 256 colours through the given ones, each at the place where its lightness belongs on the line from the first to the last. */
function mapThrough(colours: string[], evenLightness: boolean): Uint8ClampedArray {
  const stops = colours.map(oklabOf), first = stops[0]!, last = stops[stops.length - 1]!;
  const places = stops.map((stop, i) => (evenLightness ? (stop[0] - first[0]) / (last[0] - first[0]) : i / (stops.length - 1)));
  const table = new Uint8ClampedArray(256 * 3);
  for (let k = 0; k < 256; k++) {
    const t = k / 255;
    let i = 0;
    while (i < stops.length - 2 && t > places[i + 1]!) i++;
    const f = (t - places[i]!) / (places[i + 1]! - places[i]!);
    table.set(rgbOf([0, 1, 2].map((c) => stops[i]![c]! * (1 - f) + stops[i + 1]![c]! * f) as Lab), 3 * k);
  }
  return table;
}

export const colourMaps = {
  sequential: mapThrough(['#1d1b33', '#1f5a6b', '#6f9a72', '#e0bd6a', '#fbf3d8'], true),
  diverging: mapThrough(['#7c2113', '#cf8467', '#f4efe3', '#6ba596', '#114a42'], false),
};

export type ColourScale = keyof typeof colourMaps;

/** Range of the map: the values' own, or symmetric about zero. */
export function colourRange(scale: ColourScale, min: number | null, max: number | null): [number, number] {
  const low = min ?? 0, high = max ?? 1;
  if (scale === 'sequential') return high > low ? [low, high] : [low - 0.5, low + 0.5];
  const most = Math.max(Math.abs(low), Math.abs(high)) || 1;
  return [-most, most];
}

/** Entry 0..255 of the table. */
export function colourIndex(value: number, [low, high]: [number, number]): number {
  return Math.min(255, Math.max(0, Math.round(((value - low) / (high - low)) * 255)));
}
