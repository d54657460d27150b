/** Chooses archives and fields for a new draft, or starts from the recipe of the latest draft. */
import { useState } from 'react';
import type { Recipe } from '#contract/recipe.ts';
import { routes } from '#contract/routes.ts';
import type { ApiProblem } from '../../api/api-problem.ts';
import { useRoute } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { CheckboxGroup } from '../../components/Checkbox.tsx';
import { Dialog } from '../../components/Dialog.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { newRecipe } from './new-recipe.ts';

interface Props {
  campaign: string;
  latest: string | null;
  pending: boolean;
  error: ApiProblem | null;
  onCreate: (recipe: Recipe) => void;
  onClose: () => void;
}

export function NewDraft({ campaign, latest, pending, error, onCreate, onClose }: Props) {
  const archives = useRoute(routes.listArchives, { campaign }, { limit: 1000 });
  const previous = useRoute(routes.getDraft, { draft: latest ?? '' }, undefined, { enabled: latest !== null });
  const [chosen, setChosen] = useState<string[]>([]);
  const [dropped, setDropped] = useState<string[]>([]);
  const usable = archives.data?.archives.filter((archive) => archive.state === 'checked' && archive.fields.length > 0) ?? [];
  const selected = usable.filter((archive) => chosen.includes(archive.id));
  const common = selected.length === 0 ? [] : selected[0]!.fields.filter((field) => selected.every((archive) => archive.fields.includes(field)));
  const fields = common.filter((field) => !dropped.includes(field));
  return (
    <Dialog title="Begin a draft" isOpen onClose={onClose}>
      <div className="space-y-5">
        <ErrorPanel error={archives.error} />
        {archives.isPending && <Skeleton lines={4} label="Loading the archives" />}
        {archives.data && usable.length === 0 && <EmptyState title="No archive can be used yet.">An archive must have been read and checked before a draft can use it.</EmptyState>}
        {usable.length > 0 && (
          <CheckboxGroup label="Archives" value={chosen} onChange={setChosen}
            options={usable.map((archive) => ({ id: archive.id, label: `${archive.run} (${archive.name}), ${archive.snapshots ?? '?'} snapshots${archive.findings.blocker ? `, ${archive.findings.blocker} blockers` : ''}` }))} />
        )}
        {selected.length > 0 && (common.length > 0 ? (
          <CheckboxGroup label="Fields, stacked in this order" value={fields} onChange={(next) => setDropped(common.filter((field) => !next.includes(field)))} options={common.map((field) => ({ id: field, label: field }))} />
        ) : <p className="text-oxide">These archives have no field in common: choose others.</p>)}
        <ErrorPanel error={error} />
        <div className="flex flex-wrap justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          {previous.data && <Button kind="plain" isPending={pending} onPress={() => onCreate(previous.data.recipe)}>Copy the recipe of draft {previous.data.number}</Button>}
          <Button kind="primary" isPending={pending} isDisabled={fields.length === 0} onPress={() => onCreate(newRecipe(chosen, fields))}>Begin the draft</Button>
        </div>
      </div>
    </Dialog>
  );
}
