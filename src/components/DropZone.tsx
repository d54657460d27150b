/** Takes files: dropped, or chosen with a button. */
import { DropZone as AriaDropZone, FileTrigger, Text, type FileDropItem } from 'react-aria-components';
import { Button } from './Button.tsx';

interface Props {
  label: string;
  /** what is taken, in one line */
  hint?: React.ReactNode;
  onFiles: (files: File[]) => void;
  multiple?: boolean;
  isDisabled?: boolean;
  action?: string;
}

export function DropZone({ label, hint, onFiles, multiple = true, isDisabled = false, action = 'Choose files' }: Props) {
  const take = (files: File[]) => {
    if (files.length > 0) onFiles(multiple ? files : files.slice(0, 1));
  };
  return (
    <AriaDropZone
      aria-label={label} isDisabled={isDisabled}
      onDrop={(event) => void Promise.all(event.items.filter((item): item is FileDropItem => item.kind === 'file').map((item) => item.getFile())).then(take)}
      className="flex flex-col items-center gap-3 border border-dashed border-rule-strong bg-paper-raised px-4 py-10 text-center data-drop-target:border-solid data-drop-target:border-brass data-drop-target:bg-brass-wash"
    >
      <Text slot="label" className="text-lg font-medium">{label}</Text>
      {hint && <span className="max-w-prose text-sm text-pretty text-ink-soft">{hint}</span>}
      <FileTrigger allowsMultiple={multiple} onSelect={(list) => take(list ? [...list] : [])}>
        <Button kind="plain" isDisabled={isDisabled}>{action}</Button>
      </FileTrigger>
    </AriaDropZone>
  );
}
