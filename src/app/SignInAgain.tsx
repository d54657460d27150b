/** Renews a session over the open page, so that nothing typed on it is lost. */
import { useState } from 'react';
import { useMutation } from '@tanstack/react-query';
import type { ApiProblem } from '../api/api-problem.ts';
import { send } from '../api/client.ts';
import { Button } from '../components/Button.tsx';
import { Dialog } from '../components/Dialog.tsx';
import { ErrorPanel } from '../components/ErrorPanel.tsx';
import { TextField } from '../components/TextField.tsx';

export function SignInAgain({ email, onDone }: { email: string; onDone: () => void }) {
  const [password, setPassword] = useState('');
  const enter = useMutation<unknown, ApiProblem>({ mutationFn: () => send('post', '/api/auth/sign-in/email', { body: { email, password } }), onSuccess: onDone });
  return (
    <Dialog title="Your session has ended" isOpen role="alertdialog">
      <form className="space-y-4" noValidate onSubmit={(event) => { event.preventDefault(); if (password !== '') enter.mutate(); }}>
        <p>Sign in again as {email} to go on. What you typed on this page is kept; what you had just sent has to be sent once more.</p>
        <TextField label="Password" type="password" autoComplete="current-password" value={password} onChange={setPassword} autoFocus />
        <ErrorPanel error={enter.error} />
        <div className="flex flex-wrap items-center justify-between gap-3">
          <a href="/sign-in" className="text-brass-deep underline underline-offset-4">Sign in as somebody else</a>
          <Button kind="primary" type="submit" isPending={enter.isPending} isDisabled={password === ''}>Sign in again</Button>
        </div>
      </form>
    </Dialog>
  );
}
