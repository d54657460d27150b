/** Datasets, drafts, previews and reviews. */
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import { builtBeam, builtOfDraft, builtValues } from '../../services/built-values.ts';
import type { App } from '../../services/context.ts';
import { createDataset, getDataset, listDatasets } from '../../services/datasets.ts';
import { listDraftFindings } from '../../services/draft-findings.ts';
import { buildDraft, createDraft, getDraft, putRecipe } from '../../services/drafts.ts';
import { previewRecipe } from '../../services/recipe-preview.ts';
import { approveDraft, listReviews, returnDraft, submitDraft } from '../../services/review.ts';
import { mount } from '../mount.ts';

export function datasetRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.listDatasets, async ({ caller, query }) => ({ datasets: await listDatasets(app, caller, query) }));
  mount(router, app, routes.createDataset, ({ caller, params, body }) => createDataset(app, caller, params.campaign, body));
  mount(router, app, routes.getDataset, ({ caller, params }) => getDataset(app, caller, params.campaign, params.dataset));
  mount(router, app, routes.createDraft, ({ caller, params, body }) => createDraft(app, caller, params.campaign, params.dataset, body.recipe));
  mount(router, app, routes.getDraft, ({ caller, params }) => getDraft(app, caller, params.draft));
  mount(router, app, routes.putRecipe, ({ caller, params, body }) => putRecipe(app, caller, params.draft, body.recipe, body.version));
  mount(router, app, routes.previewRecipe, ({ caller, params, body }) => previewRecipe(app, caller, params.campaign, body.recipe));
  mount(router, app, routes.buildDraft, ({ caller, params }) => buildDraft(app, caller, params.draft));
  mount(router, app, routes.listDraftFindings, async ({ caller, params }) => ({ findings: await listDraftFindings(app, caller, params.draft) }));
  mount(router, app, routes.getDraftBeam, async ({ caller, params }) => builtBeam(await builtOfDraft(app, caller, params.draft)));
  mount(router, app, routes.getDraftValues, async ({ caller, params, query }) => builtValues(await builtOfDraft(app, caller, params.draft), query));
  mount(router, app, routes.submitDraft, ({ caller, params, body }) => submitDraft(app, caller, params.draft, body.note));
  mount(router, app, routes.returnDraft, ({ caller, params, body }) => returnDraft(app, caller, params.draft, body.reason));
  mount(router, app, routes.approveDraft, ({ caller, params, body }) => approveDraft(app, caller, params.draft, body));
  mount(router, app, routes.listReviews, async ({ caller }) => ({ drafts: await listReviews(app, caller) }));
  return router;
}
