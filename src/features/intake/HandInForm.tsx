/** What is handed in: files, run, solver, parameters; sending begins when the delivery is announced. */
import { useState } from 'react';
import { newDelivery } from '#contract/archive.ts';
import type { Campaign } from '#contract/campaign.ts';
import { routes } from '#contract/routes.ts';
import { useRouteMutation } from '../../api/route-query.ts';
import { Button } from '../../components/Button.tsx';
import { DropZone } from '../../components/DropZone.tsx';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { bytesText } from '../../components/number-format.ts';
import { NumberField } from '../../components/NumberField.tsx';
import { TextField } from '../../components/TextField.tsx';
import { withValue } from '../../evidence/with-value.ts';
import { sendQueue } from './send-queue.ts';

interface Chosen {
  file: File;
  sha256: string;
}

export function HandInForm({ campaign }: { campaign: Campaign }) {
  const announce = useRouteMutation(routes.createDelivery, [routes.listDeliveries]);
  const [files, setFiles] = useState<Chosen[]>([]);
  const [run, setRun] = useState('');
  const [solver, setSolver] = useState('');
  const [note, setNote] = useState('');
  const [parameters, setParameters] = useState<Record<string, number>>({});
  const [tried, setTried] = useState(false);
  const input = { run, solver, note, parameters, files: files.map(({ file, sha256 }) => ({ name: file.name, bytes: file.size, sha256: sha256.trim().toLowerCase() || null })) };
  const checked = newDelivery.safeParse(input);
  const complaint = (path: string) => (tried && !checked.success ? checked.error.issues.find((issue) => issue.path.join('.').startsWith(path))?.message : undefined);
  const choose = (more: File[]) => {
    setFiles((now) => [...now, ...more.filter((file) => !now.some((known) => known.file.name === file.name)).map((file) => ({ file, sha256: '' }))]);
    if (run === '' && more[0]) setRun(more[0].name.replace(/\.[^.]+$/, ''));
  };
  const send = () => {
    setTried(true);
    if (!checked.success) return;
    const byName = new Map(files.map(({ file }) => [file.name, file]));
    announce.mutate({ params: { campaign: campaign.slug }, body: checked.data }, {
      onSuccess: (delivery) => {
        sendQueue.add(delivery, byName);
        setFiles([]);
        setRun('');
        setNote('');
        setTried(false);
      },
    });
  };
  return (
    <form className="space-y-5" noValidate onSubmit={(event) => { event.preventDefault(); send(); }}>
      <DropZone label="Choose files" hint="Drop the files of one run here: one HDF5 file, or NPY files of its fields and time stamps." onFiles={choose} />
      {files.length > 0 && (
        <ul className="divide-y divide-rule border-y border-rule">
          {files.map(({ file, sha256 }, i) => (
            <li key={file.name} className="grid items-end gap-x-4 gap-y-2 py-3 md:grid-cols-[1fr_minmax(0,30rem)_auto]">
              <p><span className="font-mono break-all">{file.name}</span> <span className="text-ink-soft tabular-nums">{bytesText(file.size)}</span></p>
              <TextField label={`SHA-256 of ${file.name}, when you have it`} mono value={sha256} onChange={(text) => setFiles(files.map((each, k) => (k === i ? { ...each, sha256: text } : each)))} error={complaint(`files.${i}`)} />
              <Button kind="quiet" aria-label={`Leave ${file.name} out`} onPress={() => setFiles(files.filter((_, k) => k !== i))}>Leave out</Button>
            </li>
          ))}
        </ul>
      )}
      {tried && files.length === 0 && <p className="text-oxide">Choose at least one file.</p>}
      <div className="grid max-w-3xl gap-4 sm:grid-cols-2">
        <TextField label="Run" value={run} onChange={setRun} error={complaint('run')} />
        <TextField label="Solver (its reading is remembered)" value={solver} onChange={setSolver} />
        {campaign.parameters.map((parameter) => (
          <NumberField key={parameter.name} label={parameter.name} unit={parameter.unit} value={parameters[parameter.name] ?? null}
            onChange={(value) => setParameters((now) => withValue(now, parameter.name, value))} />
        ))}
        <div className="sm:col-span-2"><TextField label="Note" multiline rows={2} value={note} onChange={setNote} /></div>
      </div>
      <ErrorPanel error={announce.error} />
      <Button kind="primary" type="submit" isPending={announce.isPending}>Hand in</Button>
    </form>
  );
}
