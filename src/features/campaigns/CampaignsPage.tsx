/** Campaigns that the person may see. */
import { routes } from '#contract/routes.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute } from '../../api/route-query.ts';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link, LinkButton } from '../../components/Link.tsx';
import { bytesText } from '../../components/number-format.ts';
import { PageHeader } from '../../components/PageHeader.tsx';
import { SeverityCounts } from '../../components/SeverityCounts.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';

export function CampaignsPage() {
  const campaigns = useRoute(routes.listCampaigns);
  const ability = useAbility();
  const mayOpen = ability.can('create', 'Campaign');
  return (
    <>
      <PageHeader title="Campaigns" lead="A campaign holds the runs of one physical problem, its fields, units, limits and members." actions={mayOpen ? <LinkButton to="/campaigns/new">Open a campaign</LinkButton> : undefined} />
      <ErrorPanel error={campaigns.error} />
      {campaigns.isPending && <Skeleton lines={6} label="Loading the campaigns" />}
      {campaigns.data?.campaigns.length === 0 && <EmptyState title="You belong to no campaign yet.">{mayOpen ? 'Open one, then invite the people who work on it.' : 'Ask an administrator for an invitation.'}</EmptyState>}
      <ul className="divide-y divide-rule border-y border-rule">
        {campaigns.data?.campaigns.map((campaign) => (
          <li key={campaign.id} className="grid gap-x-8 gap-y-2 py-5 lg:grid-cols-[1fr_22rem]">
            <div className="min-w-0">
              <h2 className="text-xl"><Link to={`/campaigns/${campaign.slug}`}>{campaign.title}</Link></h2>
              <p className="mt-1 line-clamp-2 max-w-prose text-ink-soft">{campaign.description}</p>
              <p className="mt-2 text-sm text-ink-soft">{campaign.myRoles.length > 0 ? `You are ${campaign.myRoles.join(', ')}.` : 'You see it through a role in the organisation.'}</p>
            </div>
            <div className="space-y-2 text-sm tabular-nums">
              <dl className="grid grid-cols-3 gap-x-4">
                <Figure name="archives" value={campaign.counts.archives} />
                <Figure name="datasets" value={campaign.counts.datasets} />
                <Figure name="releases" value={campaign.counts.releases} />
              </dl>
              <div className="flex flex-wrap items-center justify-between gap-2">
                <SeverityCounts counts={campaign.findings} />
                <span className="text-ink-soft">{bytesText(campaign.usedBytes)} of {bytesText(campaign.quotaBytes)}</span>
              </div>
            </div>
          </li>
        ))}
      </ul>
    </>
  );
}

function Figure({ name, value }: { name: string; value: number }) {
  return (
    <div>
      <dt className="text-ink-soft">{name}</dt>
      <dd className="text-lg">{value}</dd>
    </div>
  );
}
