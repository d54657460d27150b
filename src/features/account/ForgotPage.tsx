/** Asks for a letter with a link that sets a new password. */
import { useState } from 'react';
import { useMutation } from '@tanstack/react-query';
import { passwordResetRequest } from '#contract/account.ts';
import type { ApiProblem } from '../../api/api-problem.ts';
import { Button } from '../../components/Button.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { Link } from '../../components/Link.tsx';
import { Notice } from '../../components/Notice.tsx';
import { TextField } from '../../components/TextField.tsx';
import { requestReset } from '../../api/auth-requests.ts';
import { EntryFrame } from './EntryFrame.tsx';

export function ForgotPage() {
  const [email, setEmail] = useState('');
  const [tried, setTried] = useState(false);
  const ask = useMutation<void, ApiProblem>({ mutationFn: () => requestReset(email.trim()) });
  const checked = passwordResetRequest.safeParse({ email: email.trim() });
  return (
    <EntryFrame title="New password" lead="A letter with a link goes to your address, if it has an account here.">
      {ask.isSuccess ? <Notice kind="sound" title="The letter is on its way.">The link in it holds for an hour. <Link to="/sign-in">Back to sign-in</Link></Notice> : (
        <form className="space-y-4" noValidate onSubmit={(event) => { event.preventDefault(); setTried(true); if (checked.success) ask.mutate(); }}>
          <TextField label="E-mail address" type="email" autoComplete="username" value={email} onChange={setEmail} error={tried && !checked.success ? checked.error.issues[0]!.message : undefined} autoFocus />
          <ErrorPanel error={ask.error} />
          <Button kind="primary" type="submit" isPending={ask.isPending}>Send the letter</Button>
        </form>
      )}
    </EntryFrame>
  );
}
