/** A line of very many points with what the eye can see of it: the least and the greatest in each pixel column, in their own order. */
export type Point = [x: number, y: number];

export function thinLine(points: Point[], width: number): Point[] {
  if (points.length <= 2 * width) return points;
  const kept: Point[] = [];
  let from = 0;
  for (let j = 1; j <= points.length; j += 1) {
    if (j < points.length && Math.floor(points[j][0]) === Math.floor(points[from][0])) continue;
    let low = from;
    let high = from;
    for (let k = from; k < j; k += 1) {
      if (points[k][1] < points[low][1]) low = k;
      if (points[k][1] > points[high][1]) high = k;
    }
    kept.push(points[Math.min(low, high)]);
    if (low !== high) kept.push(points[Math.max(low, high)]);
    from = j;
  }
  return kept;
}

export function pathOf(points: Point[]): string {
  return points.length === 0 ? '' : `M${points.map(([x, y]) => `${x.toFixed(1)} ${y.toFixed(1)}`).join('L')}`;
}
