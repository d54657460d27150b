/** What an array's name says, in the words that solvers use (common practice, no source; CF conventions 1.11 for lat/lon). */
import type { AxisName } from '#contract/reading.ts';

export function baseName(path: string): string {
  return path.slice(path.lastIndexOf('/') + 1);
}

/** 'xCoords_2' -> ['x', 'coords', '2'] */
export function wordsOf(path: string): string[] {
  return baseName(path)
    .replace(/([a-z])([A-Z])/g, '$1 $2')
    .toLowerCase()
    .split(/[^a-z0-9]+|(?<=[a-z])(?=\d)|(?<=\d)(?=[a-z])/)
    .filter(Boolean);
}

const has = (words: string[], vocabulary: RegExp) => words.some((word) => vocabulary.test(word));

const timeWords = /^(t|tt|time|times|tvec|tvector|tspan|tout|tsave|stamps?|timestamps?|timevec|timevector|timesteps|simtime)$/;
const weightWords = /^(w|weights?|wts?|quadrature|quad|vol|vols|volumes?|cellvolumes?|areas?|cellareas?|dv|dvol|da|dx?dy(dz)?|measure|lumped)$/;
const notTimeWords = /^(dt|delta|step|interval|stepsize|end|max|min|start|final|initial|0|number|count)$/;

/** 'exact' for a name that says nothing but time, 'part' when time is one of its words. */
export function namesTime(path: string): 'exact' | 'part' | null {
  const words = wordsOf(path);
  if (!has(words, timeWords) || has(words, weightWords) || has(words, notTimeWords)) return null;
  const rest = words.filter((word) => !timeWords.test(word) && !/^(vec|vector|steps?|snapshots?|array|values?|grid|axis|save|out|s|sim|simulation|physical|\d+)$/.test(word));
  return rest.length === 0 ? 'exact' : 'part';
}

export function namesWeights(path: string): boolean {
  return has(wordsOf(path), weightWords);
}

export function namesTimeWeights(path: string): boolean {
  const words = wordsOf(path);
  return has(words, weightWords) && has(words, timeWords);
}

export function namesMask(path: string): boolean {
  return has(wordsOf(path), /^(masks?|valid|solid|blank|iblank|fluid|land|wet|flags?)$/);
}

export function namesConnectivity(path: string): boolean {
  return has(wordsOf(path), /^(connectivity|connect|conn|cells?|elements?|elems?|triangles?|tris?|tetra|tets?|faces?|topology|edges?|quads?|hexes)$/);
}

export function namesPoints(path: string): boolean {
  return has(wordsOf(path), /^(points?|coords?|coordinates?|nodes?|vertices|verts?|xyz|xy|geometry|centroids?|mesh|positions?)$/);
}

export function namesVector(path: string): boolean {
  return has(wordsOf(path), /^(velocity|velocities|vel|vector|vec|displacement|disp|gradient|grad|flux|force|momentum|uv|uvw|stress|strain|tensor|wind|current)$/);
}

const axisWords: Record<string, AxisName> = {
  x: 'x', y: 'y', z: 'z', r: 'r', theta: 'theta', phi: 'phi', lat: 'lat', lon: 'lon', latitude: 'lat', longitude: 'lon', long: 'lon',
  radius: 'r', radial: 'r', azimuth: 'theta', angle: 'theta', depth: 'z', height: 'z', level: 'z', lev: 'z', altitude: 'z',
};
const coordinateWords = /^(coords?|coordinates?|grid|axis|axes|pos|positions?|centers?|centres?|cells?|nodes?|mesh|points?|vec|vector|values?|dims?|c|s|m|loc|locations?|\d)$/;
const edgeWords = /^(edges?|faces?|bounds?|bnds?|borders?|interfaces?|walls?|e|f|b|corners?|left|staggered)$/;

/** The axis that an array's name belongs to, and whether it names the edges of its cells. */
export function namesAxis(path: string): { axis: AxisName; edges: boolean } | null {
  // xc, xs, xgrid, xedges: the axis letter without a gap.
  const words = wordsOf(path).flatMap((word) => {
    const match = /^([xyzr])(c|s|e|f|edges?|faces?|bnds|coords?|grid|axis|pos|vec|nodes?|centers?|centres?)$/.exec(word);
    return match ? [match[1], match[2]] : [word];
  });
  const axes = words.filter((word) => word in axisWords);
  if (axes.length !== 1) return null;
  const rest = words.filter((word) => !(word in axisWords));
  if (!rest.every((word) => coordinateWords.test(word) || edgeWords.test(word))) return null;
  return { axis: axisWords[axes[0]], edges: rest.some((word) => edgeWords.test(word)) };
}

/** The axis that a label of a dimension means. */
export function labelledAxis(label: string): AxisName | null {
  if (namesTime(label) || /^(snapshots?|steps?|nt|m|ntimes?|frames?)$/i.test(baseName(label))) return 'time';
  const axis = namesAxis(label);
  if (axis && !axis.edges) return axis.axis;
  const words = wordsOf(label);
  const count = /^n([xyzr])$/.exec(words[0] ?? '');
  if (words.length === 1 && count) return count[1] as AxisName;
  if (has(words, /^(components?|comp|dims?|vector|direction|ncomp)$/)) return 'component';
  if (has(words, /^(nodes?|cells?|points?|dofs?|index|space|n|nodal|elements?|ncells?|nnodes?)$/)) return 'node';
  return null;
}
