/** The role of every array, with the reason; the first one given stands. */
import type { Reading, Role } from '#contract/reading.ts';

export class RoleBook {
  readonly #roles = new Map<string, { role: Role; why: string }>();

  give(path: string, role: Role, why: string): void {
    if (!this.#roles.has(path)) this.#roles.set(path, { role, why });
  }

  has(path: string): boolean {
    return this.#roles.has(path);
  }

  list(): Reading['roles'] {
    return [...this.#roles].map(([path, given]) => ({ path, ...given }));
  }
}
