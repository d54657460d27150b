/** Findings of the draft and its sources, with what the recipe settles, remedies into the recipe, and waivers. */
import { useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { recipeStep, type Recipe } from '#contract/recipe.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { FindingList } from '../../evidence/FindingList.tsx';
import { ReasonDialog } from '../../evidence/ReasonDialog.tsx';
import type { ShownFinding } from '../../evidence/finding-filter.ts';
import type { DraftOutlet } from './DraftPage.tsx';
import { setStep, starter, stepOf } from './recipe-edit.ts';

/** The recipe with a finding's remedy merged into its step; null when the remedy fits no step of the recipe. */
function withRemedy(recipe: Recipe, finding: ShownFinding): Recipe | null {
  if (!finding.remedy || finding.remedy.step === 'select') return null;
  const name = finding.remedy.step as 'order';
  const base = stepOf(recipe, name) ?? starter(name);
  const merged = recipeStep.safeParse({ ...base, ...finding.remedy.parameters });
  return merged.success ? setStep(recipe, merged.data) : null;
}

export function DraftFindings() {
  const { draft } = useOutletContext<DraftOutlet>();
  const ability = useAbility();
  const findings = useRoute(routes.listDraftFindings, { draft: draft.id });
  const touched = [routes.listDraftFindings, routes.getDraft];
  const waive = useRouteMutation(routes.waiveFinding, touched);
  const revoke = useRouteMutation(routes.revokeWaiver, touched);
  const put = useRouteMutation(routes.putRecipe, touched);
  const [waiving, setWaiving] = useState<ShownFinding | null>(null);
  const [unfit, setUnfit] = useState<ShownFinding | null>(null);
  const facts = { campaignId: draft.campaignId, createdBy: draft.createdBy.id };
  const mayWaive = ability.can('waive', about('Finding', facts));
  const mayEdit = (draft.state === 'draft' || draft.state === 'returned') && ability.can('update', about('Draft', facts));
  if (findings.error) return <ErrorPanel error={findings.error} />;
  if (!findings.data) return <Skeleton lines={6} label="Loading the findings" />;
  const remedy = (finding: ShownFinding) => {
    const recipe = withRemedy(draft.recipe, finding);
    setUnfit(recipe ? null : finding);
    if (recipe) put.mutate({ params: { draft: draft.id }, body: { recipe, version: draft.version } });
  };
  return (
    <div className="space-y-4">
      <ErrorPanel error={put.error ?? revoke.error} />
      {unfit && <Notice kind="caution" title="This remedy cannot be put in by itself.">Change the recipe by hand: {unfit.remedy?.sentence}</Notice>}
      <FindingList findings={findings.data.findings} onWaive={mayWaive ? setWaiving : undefined} onRevoke={mayWaive ? (finding) => revoke.mutate({ params: { finding: finding.findingId } }) : undefined} onRemedy={mayEdit ? remedy : undefined} />
      {waiving && (
        <ReasonDialog title={`Waive ${waiving.id}`} explanation={waiving.message} action="Waive this caution" pending={waive.isPending} error={waive.error} onClose={() => setWaiving(null)}
          onSubmit={(reason) => waive.mutate({ params: { finding: waiving.findingId }, body: { reason } }, { onSuccess: () => setWaiving(null) })} />
      )}
    </div>
  );
}
