/** Deliveries: announced, on their way, given up. */
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import type { App } from '../../services/context.ts';
import { cancelDelivery, createDelivery, getDelivery, listDeliveries } from '../../services/deliveries.ts';
import { mount } from '../mount.ts';

export function deliveryRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.createDelivery, ({ caller, params, body }) => createDelivery(app, caller, params.campaign, body));
  mount(router, app, routes.listDeliveries, async ({ caller, params }) => ({ deliveries: await listDeliveries(app, caller, params.campaign) }));
  mount(router, app, routes.getDelivery, ({ caller, params }) => getDelivery(app, caller, params.delivery));
  mount(router, app, routes.cancelDelivery, ({ caller, params }) => cancelDelivery(app, caller, params.delivery));
  return router;
}
