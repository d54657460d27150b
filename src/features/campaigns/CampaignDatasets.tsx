/** The datasets of a campaign, and how to begin one. */
import { useState } from 'react';
import { useNavigate, useOutletContext } from 'react-router-dom';
import { about } from '#contract/access.ts';
import { routes } from '#contract/routes.ts';
import { slug as slugSchema } from '#contract/shape.ts';
import { useAbility } from '../../access/ability.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { Dialog } from '../../components/Dialog.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { TextField } from '../../components/TextField.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';
import type { CampaignOutlet } from './CampaignPage.tsx';

export function CampaignDatasets() {
  const { campaign } = useOutletContext<CampaignOutlet>();
  const ability = useAbility();
  const datasets = useRoute(routes.listDatasets, {}, { campaign: campaign.slug });
  const [making, setMaking] = useState(false);
  const mayMake = ability.can('create', about('Dataset', { campaignId: campaign.id }));
  if (datasets.error) return <ErrorPanel error={datasets.error} />;
  if (!datasets.data) return <Skeleton lines={6} label="Loading the datasets" />;
  return (
    <div className="space-y-5">
      {mayMake && <Button kind="plain" onPress={() => setMaking(true)}>Begin a dataset</Button>}
      {datasets.data.datasets.length === 0 && <EmptyState title="No dataset yet.">A dataset is built from archives by a recipe; its approved versions are releases.</EmptyState>}
      <ul className="divide-y divide-rule border-y border-rule">
        {datasets.data.datasets.map((dataset) => (
          <li key={dataset.id} className="flex flex-wrap items-baseline justify-between gap-x-8 gap-y-1 py-4">
            <div className="min-w-0">
              <h2 className="text-lg"><Link to={`/campaigns/${campaign.slug}/datasets/${dataset.slug}`}>{dataset.title}</Link></h2>
              <p className="max-w-prose text-sm text-ink-soft">{dataset.description}</p>
            </div>
            <p className="text-sm tabular-nums">
              {dataset.latestRelease ? <>Release {dataset.latestRelease.version}, {dataset.latestRelease.rows} x {dataset.latestRelease.columns}, <TimeStamp at={dataset.latestRelease.releasedAt} /></> : 'not released yet'}
              {dataset.openDrafts > 0 && `; ${dataset.openDrafts} open ${dataset.openDrafts === 1 ? 'draft' : 'drafts'}`}
            </p>
          </li>
        ))}
      </ul>
      {making && <NewDataset campaign={campaign.slug} onClose={() => setMaking(false)} />}
    </div>
  );
}

function NewDataset({ campaign, onClose }: { campaign: string; onClose: () => void }) {
  const navigate = useNavigate();
  const create = useRouteMutation(routes.createDataset, [routes.listDatasets, routes.getCampaign]);
  const [title, setTitle] = useState('');
  const [given, setSlug] = useState<string | null>(null);
  const [description, setDescription] = useState('');
  const slug = given ?? title.toLowerCase().replace(/[^a-z0-9]+/g, '-').replace(/^-|-$/g, '');
  const checked = slugSchema.safeParse(slug);
  return (
    <Dialog title="Begin a dataset" isOpen onClose={onClose}>
      <form
        className="space-y-4"
        onSubmit={(event) => {
          event.preventDefault();
          create.mutate({ params: { campaign }, body: { slug, title, description } }, { onSuccess: (dataset) => void navigate(`/campaigns/${campaign}/datasets/${dataset.slug}`) });
        }}
      >
        <TextField label="Title" value={title} onChange={setTitle} autoFocus isRequired />
        <TextField label="Short name for addresses and scripts" value={slug} onChange={setSlug} mono error={slug !== '' && !checked.success ? checked.error.issues[0]!.message : undefined} />
        <TextField label="What it is for" value={description} onChange={setDescription} multiline rows={3} />
        <ErrorPanel error={create.error} />
        <div className="flex justify-end gap-2">
          <Button kind="quiet" onPress={onClose}>Cancel</Button>
          <Button kind="primary" type="submit" isPending={create.isPending} isDisabled={!checked.success || title.trim() === ''}>Begin</Button>
        </div>
      </form>
    </Dialog>
  );
}
