/** Every route of the HTTP API, by name. The routers mount them, the client calls them, tests walk them. */
import { accountRoutes } from './account.ts';
import { archiveRoutes } from './archive.ts';
import { campaignRoutes } from './campaign.ts';
import { datasetRoutes } from './dataset.ts';
import { operationRoutes } from './operation.ts';
import { releaseRoutes } from './release.ts';

export const routes = { ...accountRoutes, ...campaignRoutes, ...archiveRoutes, ...datasetRoutes, ...releaseRoutes, ...operationRoutes };
export type RouteName = keyof typeof routes;
export { pathTo } from './route.ts';
