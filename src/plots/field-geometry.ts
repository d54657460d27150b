/** Where the nodes of an axis lie on the screen: cells between mid-points, so that a graded grid looks graded. */

/** Borders of the cells around n rising nodes, as fractions 0..1; without coordinates, or where they do not rise, evenly. */
export function cellBorders(nodes: number[] | null, count: number): Float64Array {
  const borders = Float64Array.from({ length: count + 1 }, (_, i) => i / count);
  if (!nodes || nodes.length !== count || count < 2) return borders;
  for (let i = 1; i < count; i++) if (!(nodes[i]! > nodes[i - 1]!)) return borders;
  const low = nodes[0]! - (nodes[1]! - nodes[0]!) / 2, high = nodes[count - 1]! + (nodes[count - 1]! - nodes[count - 2]!) / 2;
  for (let i = 1; i < count; i++) borders[i] = ((nodes[i - 1]! + nodes[i]!) / 2 - low) / (high - low);
  return borders;
}

/** Cell that holds a fraction. */
export function cellAt(borders: Float64Array, fraction: number): number {
  let low = 0, high = borders.length - 2;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (borders[middle]! <= fraction) low = middle;
    else high = middle - 1;
  }
  return low;
}

/** Height over width of the picture, from the axes' own lengths when they are of one unit; kept within what a page can show. */
export function aspectOf(x: { nodes: number[] | null; unit: string | null; count: number }, y: { nodes: number[] | null; unit: string | null; count: number }): number {
  const length = (axis: { nodes: number[] | null }) => (axis.nodes && axis.nodes.length > 1 ? Math.abs(axis.nodes[axis.nodes.length - 1]! - axis.nodes[0]!) : null);
  const lx = length(x), ly = length(y);
  const ratio = lx && ly && x.unit === y.unit ? ly / lx : y.count / x.count;
  return Math.min(1.2, Math.max(0.12, ratio));
}
