/** The recipe of a draft: steps with their parameters, the beam they lead to, and what each step changes, before anything is computed. */
import { useEffect, useState } from 'react';
import { keepPreviousData, useQuery } from '@tanstack/react-query';
import { useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { recipe as recipeSchema, type Recipe } from '#contract/recipe.ts';
import { pathTo, type ResponseOf } from '#contract/route.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import type { ApiProblem } from '../../api/api-problem.ts';
import { send } from '../../api/client.ts';
import { useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { bytesText } from '../../components/number-format.ts';
import { Skeleton } from '../../components/Skeleton.tsx';
import { RecordBeam } from '../../evidence/RecordBeam.tsx';
import { RuleTable } from '../../evidence/RuleTable.tsx';
import type { DraftOutlet } from './DraftPage.tsx';
import { RecipeJson } from './RecipeJson.tsx';
import { RecipeSteps } from './RecipeSteps.tsx';
import { setStep, stepOf } from './recipe-edit.ts';

export function DraftRecipe() {
  const { draft } = useOutletContext<DraftOutlet>();
  const ability = useAbility();
  const editable = (draft.state === 'draft' || draft.state === 'returned') && ability.can('update', about('Draft', { campaignId: draft.campaignId, createdBy: draft.createdBy.id }));
  // What was changed and not saved yet, newest last: undo takes the last one back.
  const [history, setHistory] = useState<Recipe[]>([]);
  const recipe = history[history.length - 1] ?? draft.recipe;
  const put = useRouteMutation(routes.putRecipe, [routes.getDraft, routes.listDraftFindings]);
  const change = (next: Recipe) => setHistory([...history, next]);
  const mayPreview = ability.can('create', about('Draft', { campaignId: draft.campaignId }));
  const preview = usePreview(draft.campaign, recipe, mayPreview);
  const weigh = stepOf(recipe, 'weigh');
  return (
    <div className="space-y-8">
      <ErrorPanel error={preview.error} />
      {preview.data?.problems.map((problem) => <Notice key={`${problem.step}${problem.code}${problem.message}`} kind="blocker" title={problem.step === null ? 'The recipe is not complete.' : `Step ${problem.step + 1} cannot be applied.`}>{problem.message}</Notice>)}
      {preview.data?.beam && <RecordBeam beam={preview.data.beam} label="Record after this recipe" />}
      {preview.data && preview.data.rows !== null && (
        <p className="tabular-nums">Matrix of {preview.data.rows} rows and {preview.data.columns} columns, {bytesText(preview.data.bytes ?? 0)}.</p>
      )}
      {preview.isLoading && <Skeleton lines={5} label="Applying the recipe to the time stamps" />}
      <RecipeSteps campaign={draft.campaign} recipe={recipe} sources={draft.sources} effects={preview.data?.steps ?? []} onChange={editable ? change : undefined} />
      {editable && history.length > 0 && (
        <div className="sticky bottom-0 flex flex-wrap items-center gap-2 border-t border-rule bg-paper py-3">
          <Button kind="primary" isPending={put.isPending} onPress={() => put.mutate({ params: { draft: draft.id }, body: { recipe, version: draft.version } }, { onSuccess: () => setHistory([]) })}>Save the recipe</Button>
          <Button kind="plain" onPress={() => setHistory(history.slice(0, -1))}>Undo</Button>
          <Button kind="quiet" onPress={() => setHistory([])}>Undo all changes</Button>
          <ErrorPanel error={put.error} />
        </div>
      )}
      {preview.data && preview.data.rules.length > 0 && (
        <section aria-labelledby="rules-title" className="space-y-3">
          <h2 id="rules-title" className="text-xl">Time rules on this record</h2>
          {preview.data.suggestion && <p className="max-w-prose text-ink-soft">Suggested: <code className="font-mono">{preview.data.suggestion.rule}</code>. {preview.data.suggestion.reason}</p>}
          <RuleTable
            rules={preview.data.rules} chosen={weigh?.time ?? null} suggested={preview.data.suggestion?.rule} action="Use"
            onChoose={editable && weigh ? (rule) => change(setStep(recipe, { ...weigh, time: rule as typeof weigh.time })) : undefined}
          />
        </section>
      )}
      <RecipeJson recipe={recipe} onChange={editable ? change : undefined} />
    </div>
  );
}

/** The preview, asked for 300 ms after the last change. */
function usePreview(campaign: string, recipe: Recipe, enabled: boolean) {
  const [settled, setSettled] = useState(recipe);
  useEffect(() => {
    const timer = setTimeout(() => setSettled(recipe), 300);
    return () => clearTimeout(timer);
  }, [recipe]);
  return useQuery<ResponseOf<typeof routes.previewRecipe>, ApiProblem>({
    queryKey: ['previewRecipe', campaign, settled],
    queryFn: ({ signal }) => send('post', pathTo(routes.previewRecipe, { campaign }), { body: { recipe: recipeSchema.parse(settled) }, signal }),
    enabled,
    placeholderData: keepPreviousData,
  });
}
