/**
 * A small finite-volume solver for the demo's invented scenario: a warm outfall in a shallow basin with a tide.
 *
 *   dT/dt + div(v T) = kappa lap T + s(x, y) (T_out - T)        temperature excess T in K
 *
 * on a graded rectilinear grid (cells between mid-points of the nodes), first-order upwind fluxes, central diffusion,
 * explicit Euler with an adaptive step: dt = cfl x the smallest of the advective and diffusive limits. The velocity is
 * given in closed form (a tidal stream function, divergence-free, zero through the walls), so only T is solved for.
 * Not validated, not a model of any real basin. Scheme: textbook finite volumes, from memory.
 */

export interface PlumeCase {
  /** nodes in x and y (m), increasing */
  x: Float64Array;
  y: Float64Array;
  /** excess temperature of the outfall (K) and its strength (1/s) */
  excess: number;
  rate: number;
  /** amplitude of the tide's velocity (m/s) and its period (s) */
  tide: number;
  period: number;
  kappa: number;
  /** end time (s), Courant number, solver steps between two outputs */
  end: number;
  cfl: number;
  outputEvery: number;
}

/** One record: m stamps (s) and fields [m, ny, nx], x fastest. */
export interface PlumeRecord {
  time: Float64Array;
  temperature: Float32Array;
  u: Float32Array;
  v: Float32Array;
  nx: number;
  ny: number;
}

/** n nodes on [0, length], denser towards 0: x_i = length (exp(g i/(n-1)) - 1)/(exp(g) - 1); g = 0 is uniform. */
export function gradedNodes(n: number, length: number, g: number): Float64Array {
  return Float64Array.from({ length: n }, (_, i) => (g === 0 ? (length * i) / (n - 1) : (length * Math.expm1((g * i) / (n - 1))) / Math.expm1(g)));
}

/** Shape of the velocity at a point, from psi = sin(pi x/Lx)^2 sin(pi y/Ly)^2 Ly / pi; times `tide(t)` it is the velocity. */
function shape(c: PlumeCase, x: number, y: number): [number, number] {
  const lx = c.x[c.x.length - 1]!, ly = c.y[c.y.length - 1]!;
  const sx = Math.sin((Math.PI * x) / lx), sy = Math.sin((Math.PI * y) / ly);
  const cx = Math.cos((Math.PI * x) / lx), cy = Math.cos((Math.PI * y) / ly);
  return [2 * sx * sx * sy * cy, (-2 * sy * sy * sx * cx * ly) / lx];
}

/** Velocity scale (m/s) at time t: a steady drift and the tide. */
const tideAt = (c: PlumeCase, t: number) => c.tide * (0.35 + Math.sin((2 * Math.PI * t) / c.period));

/** Faces between nodes: mid-points, with the walls at the end nodes. */
function faces(nodes: Float64Array): Float64Array {
  const n = nodes.length;
  return Float64Array.from({ length: n + 1 }, (_, i) => (i === 0 ? nodes[0]! : i === n ? nodes[n - 1]! : (nodes[i - 1]! + nodes[i]!) / 2));
}

export function solvePlume(c: PlumeCase): PlumeRecord {
  const nx = c.x.length, ny = c.y.length, n = nx * ny;
  const fx = faces(c.x), fy = faces(c.y);
  const lx = c.x[nx - 1]!, ly = c.y[ny - 1]!;
  const source = new Float64Array(n);
  for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) {
    const r2 = (c.x[i]! / (0.06 * lx)) ** 2 + ((c.y[j]! - 0.42 * ly) / (0.12 * ly)) ** 2;
    source[j * nx + i] = c.rate * Math.exp(-r2);
  }
  // The velocity's shape on vertical faces (between i and i + 1), on horizontal faces, at the nodes.
  const ux = new Float64Array(n), vy = new Float64Array(n), un = new Float64Array(n), vn = new Float64Array(n);
  let fastestShape = 0;
  for (let j = 0; j < ny; j++) for (let i = 0; i < nx; i++) {
    const k = j * nx + i;
    [un[k], vn[k]] = shape(c, c.x[i]!, c.y[j]!) as [number, number];
    if (i + 1 < nx) ux[k] = shape(c, fx[i + 1]!, c.y[j]!)[0];
    if (j + 1 < ny) vy[k] = shape(c, c.x[i]!, fy[j + 1]!)[1];
    fastestShape = Math.max(fastestShape, Math.abs(un[k]!) / (fx[i + 1]! - fx[i]!) + Math.abs(vn[k]!) / (fy[j + 1]! - fy[j]!));
  }
  const diffusive = 2 * c.kappa * (1 / (c.x[1]! - c.x[0]!) ** 2 + 1 / (c.y[1]! - c.y[0]!) ** 2) + c.rate;
  let T = new Float64Array(n), next = new Float64Array(n);
  const times: number[] = [], temperatures: Float64Array[] = [];
  let t = 0, step = 0;
  const store = () => { times.push(t); temperatures.push(T.slice()); };
  store();
  while (t < c.end) {
    const a = tideAt(c, t);
    // Largest stable step of this instant: faster water, smaller step. That is what makes the stamps uneven.
    const dt = Math.min(c.cfl / (diffusive + Math.abs(a) * fastestShape), c.end - t);
    next.set(T);
    for (let j = 0; j < ny; j++) for (let i = 0; i + 1 < nx; i++) {
      const left = j * nx + i, right = left + 1, u = a * ux[left]!;
      const flux = u * (u > 0 ? T[left]! : T[right]!) - (c.kappa * (T[right]! - T[left]!)) / (c.x[i + 1]! - c.x[i]!);
      next[left]! -= (dt * flux) / (fx[i + 1]! - fx[i]!);
      next[right]! += (dt * flux) / (fx[i + 2]! - fx[i + 1]!);
    }
    for (let j = 0; j + 1 < ny; j++) for (let i = 0; i < nx; i++) {
      const low = j * nx + i, high = low + nx, v = a * vy[low]!;
      const flux = v * (v > 0 ? T[low]! : T[high]!) - (c.kappa * (T[high]! - T[low]!)) / (c.y[j + 1]! - c.y[j]!);
      next[low]! -= (dt * flux) / (fy[j + 1]! - fy[j]!);
      next[high]! += (dt * flux) / (fy[j + 2]! - fy[j + 1]!);
    }
    for (let k = 0; k < n; k++) next[k]! += dt * source[k]! * (c.excess - T[k]!);
    [T, next] = [next, T];
    t += dt;
    step++;
    if (step % c.outputEvery === 0 || t >= c.end) store();
  }
  const m = times.length;
  const temperature = new Float32Array(m * n), u = new Float32Array(m * n), v = new Float32Array(m * n);
  for (let s = 0; s < m; s++) {
    const a = tideAt(c, times[s]!);
    temperature.set(temperatures[s]!, s * n);
    for (let k = 0; k < n; k++) {
      u[s * n + k] = a * un[k]!;
      v[s * n + k] = a * vn[k]!;
    }
  }
  return { time: Float64Array.from(times), temperature, u, v, nx, ny };
}
