/** One campaign; archives, datasets, members and settings are its tabs. */
import { Outlet, useParams } from 'react-router-dom';
import { about } from '#contract/access.ts';
import type { Campaign } from '#contract/campaign.ts';
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute } from '../../api/route-query.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { LinkButton } from '../../components/Link.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TabLinks } from '../../components/TabLinks.tsx';

export interface CampaignOutlet {
  campaign: Campaign;
}

export function CampaignPage() {
  const { campaign: slug = '' } = useParams();
  const ability = useAbility();
  const campaign = useRoute(routes.getCampaign, { campaign: slug });
  if (campaign.error) return <ErrorPanel error={campaign.error} />;
  if (!campaign.data) return <Skeleton lines={8} label="Loading the campaign" />;
  const data = campaign.data;
  const { blocker, caution } = data.findings;
  const status = blocker > 0 ? { kind: 'blocker' as const, label: `${blocker} open blockers in its archives` } : caution > 0 ? { kind: 'caution' as const, label: `${caution} open cautions in its archives` } : { kind: 'sound' as const, label: 'No open finding in its archives' };
  const base = `/campaigns/${slug}`;
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: data.title }]} />
      <PageHeader
        kicker="Campaign" title={data.title} lead={data.description} status={data.counts.archives > 0 ? status : undefined}
        actions={ability.can('hand-in', about('Delivery', { campaignId: data.id })) ? <LinkButton to={`${base}/hand-in`}>Hand in an archive</LinkButton> : undefined}
      />
      <TabLinks
        label="Parts of the campaign"
        items={[
          { to: base, label: `Archives ${data.counts.archives}`, end: true },
          { to: `${base}/datasets`, label: `Datasets ${data.counts.datasets}` },
          { to: `${base}/members`, label: `Members ${data.counts.members}` },
          { to: `${base}/settings`, label: 'Fields, parameters, thresholds' },
        ]}
      />
      <Outlet context={{ campaign: data } satisfies CampaignOutlet} />
    </>
  );
}
