/** SHA-256 of a recipe, over JSON with sorted keys: equal recipes have equal hashes. */
import { createHash } from 'node:crypto';
import type { Recipe } from '#contract/recipe.ts';

function sorted(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(sorted);
  if (value === null || typeof value !== 'object') return value;
  return Object.fromEntries(Object.entries(value).sort(([a], [b]) => (a < b ? -1 : 1)).map(([key, each]) => [key, sorted(each)]));
}

export function recipeHash(recipe: Recipe): string {
  return createHash('sha256').update(JSON.stringify(sorted(recipe))).digest('hex');
}
