/** Hands in an archive: what it is, its files, and how sending goes; deliveries that were interrupted go on from here. */
import { useEffect, useState, useSyncExternalStore } from 'react';
import { useQueryClient } from '@tanstack/react-query';
import { useParams } from 'react-router-dom';
import type { Delivery } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { routeKey, useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { DeliveryEntry } from './DeliveryEntry.tsx';
import { HandInForm } from './HandInForm.tsx';
import { sendQueue } from './send-queue.ts';

export function HandInPage() {
  const { campaign: slug = '' } = useParams();
  const client = useQueryClient();
  const campaign = useRoute(routes.getCampaign, { campaign: slug });
  const deliveries = useRoute(routes.listDeliveries, { campaign: slug });
  const sending = useSyncExternalStore(sendQueue.subscribe, sendQueue.getSnapshot);
  const [finished, setFinished] = useState<Delivery[]>([]);
  const load = useRouteMutation(routes.getDelivery);
  useEffect(() => {
    sendQueue.whenFinished(() => {
      for (const route of [routes.listDeliveries, routes.listArchives, routes.getCampaign, routes.getDesk]) void client.invalidateQueries({ queryKey: routeKey(route) });
    });
    const warn = (event: BeforeUnloadEvent) => { if (sendQueue.busy()) event.preventDefault(); };
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [client]);
  const open = deliveries.data?.deliveries ?? [];
  // What finished in this tab stays on the page, so that it can be followed to its archive.
  const done = sending.filter((each) => each.campaign === slug && each.files.every((file) => file.state === 'done'));
  useEffect(() => {
    for (const each of done) {
      if (finished.some((known) => known.id === each.delivery)) continue;
      load.mutate({ params: { delivery: each.delivery } }, { onSuccess: (delivery) => setFinished((now) => (now.some((known) => known.id === delivery.id) ? now : [delivery, ...now])) });
    }
    // only a delivery that is newly done asks for it
    // eslint-disable-next-line react-hooks/exhaustive-deps
  }, [done.map((each) => each.delivery).join()]);
  if (campaign.error) return <ErrorPanel error={campaign.error} />;
  if (!campaign.data) return <Skeleton lines={6} label="Loading the campaign" />;
  const shown = [...finished.filter((each) => !open.some((other) => other.id === each.id)), ...open];
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: campaign.data.title, to: `/campaigns/${slug}` }, { label: 'Hand in' }]} />
      <PageHeader title="Hand in an archive" lead="HDF5 or NPY files of one run. They are verified by SHA-256, read and checked; what is received is never altered." />
      <HandInForm campaign={campaign.data} />
      <ErrorPanel error={deliveries.error} />
      {shown.length > 0 && (
        <section aria-labelledby="deliveries-title" className="mt-10 space-y-3">
          <h2 id="deliveries-title" className="text-xl">Deliveries</h2>
          <ul className="divide-y divide-rule border-y border-rule">
            {shown.map((delivery) => <DeliveryEntry key={delivery.id} delivery={delivery} sending={sending.find((each) => each.delivery === delivery.id)} />)}
          </ul>
        </section>
      )}
    </>
  );
}
