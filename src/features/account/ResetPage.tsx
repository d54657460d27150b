/** Sets a new password with the secret of the letter. */
import { useState } from 'react';
import { useMutation } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import { password as schema } from '#contract/account.ts';
import type { ApiProblem } from '../../api/api-problem.ts';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { Notice } from '../../components/Notice.tsx';
import { TextField } from '../../components/TextField.tsx';
import { resetPassword } from '../../api/auth-requests.ts';
import { EntryFrame } from './EntryFrame.tsx';

export function ResetPage() {
  const [search] = useSearchParams();
  const [password, setPassword] = useState('');
  const [tried, setTried] = useState(false);
  const reset = useMutation<void, ApiProblem>({ mutationFn: () => resetPassword(search.get('token') ?? '', password) });
  const checked = schema.safeParse(password);
  return (
    <EntryFrame title="Set a new password">
      {reset.isSuccess ? <Notice kind="sound" title="The new password is set.">Every other session was ended. <Link to="/sign-in">Sign in</Link></Notice> : (
        <form className="space-y-4" noValidate onSubmit={(event) => { event.preventDefault(); setTried(true); if (checked.success) reset.mutate(); }}>
          <TextField label="New password, at least 12 characters" type="password" autoComplete="new-password" value={password} onChange={setPassword} error={tried && !checked.success ? checked.error.issues[0]!.message : undefined} autoFocus />
          <ErrorPanel error={reset.error} />
          <Button kind="primary" type="submit" isPending={reset.isPending}>Set the password</Button>
        </form>
      )}
    </EntryFrame>
  );
}
