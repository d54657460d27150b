/** Which address shows which page; every page is loaded when it is first shown. */
import type { RouteObject } from 'react-router-dom';

type Load = () => Promise<Record<string, unknown>>;

/** A route whose page is the export `name` of a module. */
function page(path: string | null, name: string, load: Load, children?: RouteObject[]): RouteObject {
  const lazy = async () => ({ Component: (await load())[name] as React.ComponentType });
  return path === null ? { index: true, lazy } : { path, lazy, children };
}

export const openRoutes: RouteObject[] = [
  page('/sign-in', 'SignInPage', () => import('../features/account/SignInPage.tsx')),
  page('/forgot', 'ForgotPage', () => import('../features/account/ForgotPage.tsx')),
  page('/reset', 'ResetPage', () => import('../features/account/ResetPage.tsx')),
  page('/join/:secret', 'JoinPage', () => import('../features/account/JoinPage.tsx')),
  page('/demo-inbox', 'DemoInboxPage', () => import('../features/account/DemoInboxPage.tsx')),
  // Every component at once, to look at while developing; the build leaves it out.
  ...(import.meta.env.DEV ? [page('/specimen', 'Specimen', () => import('./Specimen.tsx'))] : []),
];

export const pageRoutes: RouteObject[] = [
  page('/', 'DeskPage', () => import('../features/desk/DeskPage.tsx')),
  page('/campaigns', 'CampaignsPage', () => import('../features/campaigns/CampaignsPage.tsx')),
  page('/campaigns/new', 'NewCampaignPage', () => import('../features/campaigns/NewCampaignPage.tsx')),
  page('/campaigns/:campaign', 'CampaignPage', () => import('../features/campaigns/CampaignPage.tsx'), [
    page(null, 'CampaignArchives', () => import('../features/campaigns/CampaignArchives.tsx')),
    page('archives', 'CampaignArchives', () => import('../features/campaigns/CampaignArchives.tsx')),
    page('datasets', 'CampaignDatasets', () => import('../features/campaigns/CampaignDatasets.tsx')),
    page('members', 'CampaignMembers', () => import('../features/campaigns/CampaignMembers.tsx')),
    page('settings', 'CampaignSettings', () => import('../features/campaigns/CampaignSettings.tsx')),
  ]),
  page('/campaigns/:campaign/hand-in', 'HandInPage', () => import('../features/intake/HandInPage.tsx')),
  page('/archives/:archive', 'ArchivePage', () => import('../features/archives/ArchivePage.tsx'), [
    page(null, 'ArchiveFindings', () => import('../features/archives/ArchiveFindings.tsx')),
    page('record', 'ArchiveRecord', () => import('../features/archives/ArchiveRecord.tsx')),
    page('snapshots', 'ArchiveSnapshots', () => import('../features/archives/ArchiveSnapshots.tsx')),
    page('reading', 'ArchiveReading', () => import('../features/archives/ArchiveReading.tsx')),
    page('about', 'ArchiveAbout', () => import('../features/archives/ArchiveAbout.tsx')),
  ]),
  page('/datasets', 'DatasetsPage', () => import('../features/datasets/DatasetsPage.tsx')),
  page('/campaigns/:campaign/datasets/:dataset', 'DatasetPage', () => import('../features/datasets/DatasetPage.tsx')),
  page('/campaigns/:campaign/datasets/:dataset/releases/:version', 'ReleasePage', () => import('../features/datasets/ReleasePage.tsx')),
  page('/drafts/:draft', 'DraftPage', () => import('../features/datasets/DraftPage.tsx'), [
    page(null, 'DraftRecipe', () => import('../features/datasets/DraftRecipe.tsx')),
    page('findings', 'DraftFindings', () => import('../features/datasets/DraftFindings.tsx')),
    page('matrix', 'DraftMatrix', () => import('../features/datasets/DraftMatrix.tsx')),
    page('sources', 'DraftSources', () => import('../features/datasets/DraftSources.tsx')),
  ]),
  page('/review', 'ReviewPage', () => import('../features/review/ReviewPage.tsx')),
  page('/audit', 'AuditPage', () => import('../features/audit/AuditPage.tsx')),
  page('/tokens', 'TokensPage', () => import('../features/account/TokensPage.tsx')),
  page('/admin', 'AdminPage', () => import('../features/admin/AdminPage.tsx')),
];
