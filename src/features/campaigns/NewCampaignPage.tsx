/** Opens a campaign: name and title now, fields and parameters on its settings page. */
import { useState } from 'react';
import { useNavigate } from 'react-router-dom';
import { newCampaign } from '#contract/campaign.ts';
import { routes } from '#contract/routes.ts';
import { useRouteMutation } from '../../api/route-query.ts';
import { Breadcrumbs } from '../../components/Breadcrumbs.tsx';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { TextField } from '../../components/TextField.tsx';

export function NewCampaignPage() {
  const navigate = useNavigate();
  const create = useRouteMutation(routes.createCampaign, [routes.listCampaigns, routes.getMe]);
  const [title, setTitle] = useState('');
  const [given, setSlug] = useState<string | null>(null);
  const [description, setDescription] = useState('');
  const [tried, setTried] = useState(false);
  const slug = given ?? title.toLowerCase().replace(/[^a-z0-9]+/g, '-').replace(/^-|-$/g, '').slice(0, 60);
  const checked = newCampaign.safeParse({ title, slug, description });
  const complaint = (field: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path[0] === field)?.message : undefined);
  return (
    <>
      <Breadcrumbs items={[{ label: 'Campaigns', to: '/campaigns' }, { label: 'Open a campaign' }]} />
      <PageHeader title="Open a campaign" lead="One physical problem: its runs, fields, units, limits and people." />
      <form
        className="max-w-xl space-y-4" noValidate
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (checked.success) create.mutate({ body: checked.data }, { onSuccess: (campaign) => void navigate(`/campaigns/${campaign.slug}/settings`) });
        }}
      >
        <TextField label="Title" value={title} onChange={setTitle} error={complaint('title')} autoFocus />
        <TextField label="Short name for addresses and scripts" mono value={slug} onChange={setSlug} error={complaint('slug')} />
        <TextField label="Description" multiline rows={4} value={description} onChange={setDescription} />
        <ErrorPanel error={create.error} />
        <Button kind="primary" type="submit" isPending={create.isPending}>Open the campaign</Button>
      </form>
    </>
  );
}
