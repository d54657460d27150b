/** Which archives and fields the matrix is made of. */
import type { Draft } from '#contract/dataset.ts';
import type { SelectStep } from '#contract/recipe.ts';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { CheckboxGroup } from '../../components/Checkbox.tsx';

export function SelectForm({ campaign, step, sources, onChange }: { campaign: string; step: SelectStep; sources: Draft['sources']; onChange: (step: SelectStep) => void }) {
  const archives = useRoute(routes.listArchives, { campaign }, { limit: 1000 });
  const usable = (archives.data?.archives ?? []).filter((archive) => archive.state === 'checked' || step.archives.includes(archive.id));
  const options = usable.length > 0 ? usable.map((archive) => ({ id: archive.id, label: `${archive.run} (${archive.name})` })) : sources.map((source) => ({ id: source.archive, label: source.run }));
  const fields = [...new Set([...step.fields, ...usable.filter((archive) => step.archives.includes(archive.id)).flatMap((archive) => archive.fields)])];
  return (
    <div className="grid gap-4 sm:grid-cols-2">
      <CheckboxGroup label="Archives" value={step.archives} options={options} onChange={(chosen) => chosen.length > 0 && onChange({ ...step, archives: options.map((option) => option.id).filter((id) => chosen.includes(id)) })} />
      <CheckboxGroup label="Fields, stacked in this order" value={step.fields} options={fields.map((field) => ({ id: field, label: field }))} onChange={(chosen) => chosen.length > 0 && onChange({ ...step, fields: fields.filter((field) => chosen.includes(field)) })} />
    </div>
  );
}
