/** Personal tokens for scripts: made, shown once, revoked. */
import { useState } from 'react';
import { tokenScopes, type TokenScope } from '#contract/access.ts';
import { newToken, type Token } from '#contract/account.ts';
import { routes } from '#contract/routes.ts';
import { useRoute, useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { CheckboxGroup } from '../../components/Checkbox.tsx';
import { CodeBlock } from '../../components/CodeBlock.tsx';
import { ConfirmDialog } from '../../components/ConfirmDialog.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Notice } from '../../components/Notice.tsx';
import { NumberField } from '../../components/NumberField.tsx';
import { PageHeader } from '../../components/PageHeader.tsx';
import { Select } from '../../components/Select.tsx';
import { TextField } from '../../components/TextField.tsx';
import { TimeStamp } from '../../components/TimeStamp.tsx';

const scopeWords: Record<TokenScope, string> = { read: 'read pages', pull: 'pull releases', 'hand-in': 'hand in archives' };

export function TokensPage() {
  const tokens = useRoute(routes.listTokens);
  const campaigns = useRoute(routes.listCampaigns);
  const create = useRouteMutation(routes.createToken, [routes.listTokens]);
  const revoke = useRouteMutation(routes.revokeToken, [routes.listTokens]);
  const [name, setName] = useState('');
  const [scopes, setScopes] = useState<TokenScope[]>(['pull']);
  const [campaign, setCampaign] = useState('');
  const [days, setDays] = useState<number | null>(90);
  const [tried, setTried] = useState(false);
  const [revoking, setRevoking] = useState<Token | null>(null);
  const checked = newToken.safeParse({ name, scopes, campaign: campaign || null, days: days ?? 0 });
  const complaint = (field: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path[0] === field)?.message : undefined);
  return (
    <>
      <PageHeader title="Personal tokens" lead="A token lets a script do a part of what you may do, until it expires." />
      {create.data && (
        <Notice kind="sound" title={`"${create.data.name}" is made. Copy it now: it is shown this once.`}>
          <CodeBlock label="Token" text={create.data.secret} />
        </Notice>
      )}
      <form
        className="grid max-w-3xl items-start gap-4 sm:grid-cols-2" noValidate
        onSubmit={(event) => {
          event.preventDefault();
          setTried(true);
          if (checked.success) create.mutate({ body: checked.data }, { onSuccess: () => { setName(''); setTried(false); } });
        }}
      >
        <TextField label="Name" placeholder="training pipeline" value={name} onChange={setName} error={complaint('name')} />
        <CheckboxGroup label="May" value={scopes} onChange={(next) => setScopes(next as TokenScope[])} options={tokenScopes.map((scope) => ({ id: scope, label: scopeWords[scope] }))} error={complaint('scopes')} />
        <Select label="In" value={campaign} onChange={setCampaign} options={[{ id: '', label: 'all my campaigns' }, ...(campaigns.data?.campaigns ?? []).map((each) => ({ id: each.slug, label: each.title }))]} />
        <NumberField label="Holds for" unit="days" value={days} onChange={setDays} error={complaint('days')} />
        <div className="sm:col-span-2"><ErrorPanel error={create.error} /><Button kind="primary" type="submit" isPending={create.isPending}>Make the token</Button></div>
      </form>
      <section aria-labelledby="tokens-title" className="mt-10 space-y-3">
        <h2 id="tokens-title" className="text-xl">My tokens</h2>
        <ErrorPanel error={tokens.error} />
        {tokens.data?.tokens.length === 0 && <EmptyState title="No token yet." />}
        <ul className="divide-y divide-rule border-y border-rule">
          {tokens.data?.tokens.map((token) => (
            <li key={token.id} className="flex flex-wrap items-baseline justify-between gap-x-6 gap-y-1 py-3">
              <div>
                <p className="font-medium">{token.name} <code className="ml-2 font-mono text-sm text-ink-soft">{token.start}…</code></p>
                <p className="text-sm text-ink-soft">{token.scopes.map((scope) => scopeWords[scope]).join(', ')} in {token.campaign ?? 'all campaigns'}; {token.expiresAt && <>until <TimeStamp at={token.expiresAt} /></>}; {token.lastUsedAt ? <>last used <TimeStamp at={token.lastUsedAt} /></> : 'not used yet'}</p>
              </div>
              <Button kind="quiet" aria-label={`Revoke ${token.name}`} onPress={() => setRevoking(token)}>Revoke</Button>
            </li>
          ))}
        </ul>
      </section>
      {revoking && (
        <ConfirmDialog title={`Revoke "${revoking.name}"`} action="Revoke the token" danger pending={revoke.isPending} error={revoke.error} onClose={() => setRevoking(null)} onConfirm={() => revoke.mutate({ params: { token: revoking.id } }, { onSuccess: () => setRevoking(null) })}>
          Scripts that use it are refused from now on. This cannot be undone.
        </ConfirmDialog>
      )}
    </>
  );
}
