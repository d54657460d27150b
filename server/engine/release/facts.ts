/** All that the texts of a release speak of. Times come from the approval, so that the texts are made from facts alone. */
import type { BuildSummary } from '#contract/dataset.ts';
import type { Recipe } from '#contract/recipe.ts';
import type { Person } from '#contract/shape.ts';

export interface ReleaseFacts {
  campaign: { slug: string; title: string };
  dataset: { slug: string; title: string; description: string };
  version: number;
  build: BuildSummary;
  recipe: Recipe;
  builtBy: Person;
  approvedBy: Person;
  /** ISO 8601 */
  approvedAt: string;
  licence: string;
  handlingLabel: string;
  contact: string;
  note: string;
  sources: { archive: string; run: string; name: string; files: { name: string; sha256: string; bytes: number }[]; handedInBy: Person; handedInAt: string }[];
  waivers: { check: string; message: string; reason: string; by: Person; at: string }[];
  program: string;
}

export function citation(facts: ReleaseFacts): string {
  return `${facts.builtBy.name} (${facts.approvedAt.slice(0, 4)}): ${facts.dataset.title}, release ${facts.version}. Campaign "${facts.campaign.title}". Matrix SHA-256 ${facts.build.matrixSha256.slice(0, 16)}.`;
}
