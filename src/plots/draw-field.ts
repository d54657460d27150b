/** Paints cell values as an image, pixel by pixel of the screen; what is not finite is hatched. */
import { colourIndex, colourMaps, type ColourScale } from './colour-map.ts';
import { cellAt } from './field-geometry.ts';

export interface FieldPicture {
  /** y.count x x.count, x fastest */
  values: (number | null)[];
  columns: number;
  xBorders: Float64Array;
  yBorders: Float64Array;
  scale: ColourScale;
  range: [number, number];
}

/** `hatch` as #rrggbb. The y axis points up. */
export function drawField(context: CanvasRenderingContext2D, hatch: string, { values, columns, xBorders, yBorders, scale, range }: FieldPicture): void {
  const { width, height } = context.canvas;
  if (width < 1 || height < 1) return;
  const image = context.createImageData(width, height);
  const table = colourMaps[scale];
  const missing = Number.parseInt(hatch.slice(1), 16) || 0;
  const columnAt = Int32Array.from({ length: width }, (_, p) => cellAt(xBorders, (p + 0.5) / width));
  for (let row = 0; row < height; row += 1) {
    const start = cellAt(yBorders, 1 - (row + 0.5) / height) * columns;
    for (let p = 0; p < width; p += 1) {
      const value = values[start + columnAt[p]];
      const at = 4 * (row * width + p);
      if (value === null || value === undefined) {
        image.data[at] = missing >> 16;
        image.data[at + 1] = (missing >> 8) & 255;
        image.data[at + 2] = missing & 255;
        image.data[at + 3] = (row + p) % 8 < 2 ? 255 : 0;
      } else {
        const k = 3 * colourIndex(value, range);
        image.data[at] = table[k];
        image.data[at + 1] = table[k + 1];
        image.data[at + 2] = table[k + 2];
        image.data[at + 3] = 255;
      }
    }
  }
  context.putImageData(image, 0, 0);
}
