/** The recipe that a new draft starts from: every step in its place, with the choices that suit most records. */
import type { Recipe } from '#contract/recipe.ts';

export function newRecipe(archives: string[], fields: string[]): Recipe {
  return {
    pennyweight: 1,
    steps: [
      { step: 'select', archives, fields },
      { step: 'order', sort: true, restart: 'keep-later', dropDuplicates: true, dropFrozen: false, drop: [] },
      { step: 'centre', subtract: 'weighted-mean' },
      { step: 'weigh', time: 'trapezoid', space: 'tensor', runs: 'equal' },
      archives.length > 2
        ? { step: 'split', by: 'run', shares: [0.7, 0.15, 0.15], blocks: 10, guard: 1, seed: 1 }
        : { step: 'split', by: 'blocks', shares: [0.7, 0.15, 0.15], blocks: 10, guard: 1, seed: 1 },
      { step: 'cast', type: 'float64' },
    ],
  };
}
