/** Sign-in by e-mail and password. */
import { useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useNavigate, useSearchParams } from 'react-router-dom';
import { signIn as schema } from '#contract/account.ts';
import { routes } from '#contract/routes.ts';
import type { ApiProblem } from '../../api/api-problem.ts';
import { useRoute } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { TextField } from '../../components/TextField.tsx';
import { signIn } from '../../api/auth-requests.ts';
import { EntryFrame } from './EntryFrame.tsx';

export function SignInPage() {
  const navigate = useNavigate();
  const client = useQueryClient();
  const [search] = useSearchParams();
  const health = useRoute(routes.getHealth);
  const [email, setEmail] = useState('');
  const [password, setPassword] = useState('');
  const [tried, setTried] = useState(false);
  const enter = useMutation<void, ApiProblem>({ mutationFn: () => signIn(email.trim(), password), onSuccess: () => { client.clear(); void navigate(placeFrom(search.get('to')), { replace: true }); } });
  const checked = schema.safeParse({ email: email.trim(), password });
  const complaint = (field: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path[0] === field)?.message : undefined);
  return (
    <EntryFrame title="Sign in" lead="Snapshot archives are handed in, weighed, repaired, approved and pulled here.">
      <form className="space-y-4" noValidate onSubmit={(event) => { event.preventDefault(); setTried(true); if (checked.success) enter.mutate(); }}>
        <TextField label="E-mail address" type="email" autoComplete="username" value={email} onChange={setEmail} error={complaint('email')} autoFocus />
        <TextField label="Password" type="password" autoComplete="current-password" value={password} onChange={setPassword} error={complaint('password')} />
        <ErrorPanel error={enter.error} />
        <div className="flex flex-wrap items-center justify-between gap-3">
          <Button kind="primary" type="submit" isPending={enter.isPending}>Sign in</Button>
          <Link to="/forgot">Forgot the password?</Link>
        </div>
      </form>
      {health.data?.demo && <p className="mt-8 text-sm text-ink-soft">This is a demo with invented data. Its accounts were printed when it started and stand in storage/demo-accounts.txt; its mail is caught in the <Link to="/demo-inbox">demo inbox</Link>.</p>}
    </EntryFrame>
  );
}

/** Only places of our own: a link must not lead elsewhere after sign-in. */
function placeFrom(to: string | null): string {
  return to && to.startsWith('/') && !to.startsWith('//') ? to : '/';
}
