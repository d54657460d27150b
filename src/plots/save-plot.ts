/** Saves a plot as it is seen: the theme's colours are written into the file. */
import { saveFile } from '../components/save-file.ts';

function svgText(svg: SVGSVGElement): string {
  const style = getComputedStyle(document.documentElement);
  const copy = svg.cloneNode(true) as SVGSVGElement;
  copy.setAttribute('xmlns', 'http://www.w3.org/2000/svg');
  copy.setAttribute('style', `background:${style.getPropertyValue('--paper-raised').trim()}`);
  return new XMLSerializer().serializeToString(copy).replace(/var\(--([a-z-]+)\)/g, (_, name: string) => style.getPropertyValue(`--${name}`).trim());
}

export function saveSvg(svg: SVGSVGElement, name: string): void {
  saveFile(`${name}.svg`, svgText(svg), 'image/svg+xml');
}

/** Twice the size on the screen, for print. */
export async function savePng(svg: SVGSVGElement, name: string): Promise<void> {
  const { width, height } = svg.getBoundingClientRect();
  const image = new Image(width, height);
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(svgText(svg))}`;
  await image.decode();
  const canvas = document.createElement('canvas');
  canvas.width = Math.round(2 * width);
  canvas.height = Math.round(2 * height);
  canvas.getContext('2d')?.drawImage(image, 0, 0, canvas.width, canvas.height);
  const blob = await new Promise<Blob | null>((done) => canvas.toBlob(done, 'image/png'));
  if (blob) saveFile(`${name}.png`, blob);
}
