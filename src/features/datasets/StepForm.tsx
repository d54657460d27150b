/** The parameters of one step. */
import type { Draft } from '#contract/dataset.ts';
import type { RecipeStep } from '#contract/recipe.ts';
import { spaceRuleIds, timeRuleIds, type SpaceRuleId, type TimeRuleId } from '#contract/weights.ts';
import { Checkbox } from '../../components/Checkbox.tsx';
import { NumberField } from '../../components/NumberField.tsx';
import { Select } from '../../components/Select.tsx';
import { SelectForm } from './SelectForm.tsx';

interface Props {
  campaign: string;
  step: RecipeStep;
  sources: Draft['sources'];
  onChange: (step: RecipeStep) => void;
}

const row = 'flex flex-wrap items-end gap-x-5 gap-y-3';
const whole = (value: number | null, least: number) => Math.max(least, Math.round(value ?? least));

export function StepForm({ campaign, step, sources, onChange }: Props) {
  switch (step.step) {
    case 'select':
      return <SelectForm campaign={campaign} step={step} sources={sources} onChange={onChange} />;
    case 'order':
      return (
        <div className={row}>
          <Select label="On a restart" value={step.restart} onChange={(restart) => onChange({ ...step, restart: restart as typeof step.restart })}
            options={[{ id: 'keep-later', label: 'keep the later segment' }, { id: 'keep-earlier', label: 'keep the earlier segment' }, { id: 'refuse', label: 'refuse' }]} />
          <Checkbox isSelected={step.sort} onChange={(sort) => onChange({ ...step, sort })}>Sort by time</Checkbox>
          <Checkbox isSelected={step.dropDuplicates} onChange={(dropDuplicates) => onChange({ ...step, dropDuplicates })}>Drop repeated stamps</Checkbox>
          <Checkbox isSelected={step.dropFrozen} onChange={(dropFrozen) => onChange({ ...step, dropFrozen })}>Drop frozen copies</Checkbox>
        </div>
      );
    case 'window':
      return (
        <div className={row}>
          <NumberField label="From time" value={step.from} onChange={(from) => onChange({ ...step, from })} />
          <NumberField label="To time" value={step.to} onChange={(to) => onChange({ ...step, to })} />
          <NumberField label="Every k-th" value={step.every} onChange={(every) => onChange({ ...step, every: whole(every, 1) })} />
          <NumberField label="First" value={step.first} onChange={(first) => onChange({ ...step, first: first === null ? null : whole(first, 1) })} />
          <NumberField label="Last" value={step.last} onChange={(last) => onChange({ ...step, last: last === null ? null : whole(last, 1) })} />
        </div>
      );
    case 'centre':
      return (
        <Select label="Subtract" value={step.subtract} onChange={(subtract) => onChange({ ...step, subtract: subtract as typeof step.subtract })}
          options={[{ id: 'weighted-mean', label: 'the weighted time mean over all runs' }, { id: 'weighted-mean-per-run', label: "each run's own weighted time mean" }, { id: 'first-snapshot', label: 'the first snapshot' }, { id: 'nothing', label: 'nothing' }]} />
      );
    case 'weigh':
      return (
        <div className={row}>
          <Select label="Time rule" value={step.time} onChange={(time) => onChange({ ...step, time: time as TimeRuleId })} options={timeRuleIds.map((id) => ({ id, label: id }))} />
          <Select label="Space rule" value={step.space} onChange={(space) => onChange({ ...step, space: space as SpaceRuleId })} options={spaceRuleIds.map((id) => ({ id, label: id }))} />
        </div>
      );
    case 'split': {
      const share = (i: 0 | 1 | 2, value: number | null) => {
        const shares: [number, number, number] = [...step.shares];
        shares[i] = Math.min(100, Math.max(0, value ?? 0)) / 100;
        onChange({ ...step, shares });
      };
      return (
        <div className={row}>
          <Select label="Split" value={step.by} onChange={(by) => onChange({ ...step, by: by as typeof step.by })} options={[{ id: 'run', label: 'by run' }, { id: 'blocks', label: 'by blocks of time' }]} />
          <NumberField label="Train" unit="%" value={Math.round(step.shares[0] * 100)} onChange={(value) => share(0, value)} />
          <NumberField label="Validation" unit="%" value={Math.round(step.shares[1] * 100)} onChange={(value) => share(1, value)} />
          <NumberField label="Test" unit="%" value={Math.round(step.shares[2] * 100)} onChange={(value) => share(2, value)} />
          {step.by === 'blocks' && <NumberField label="Blocks" value={step.blocks} onChange={(blocks) => onChange({ ...step, blocks: whole(blocks, 3) })} />}
          {step.by === 'blocks' && <NumberField label="Left out between parts" value={step.guard} onChange={(guard) => onChange({ ...step, guard: whole(guard, 0) })} />}
          <NumberField label="Seed" value={step.seed} onChange={(seed) => onChange({ ...step, seed: whole(seed, 0) })} />
        </div>
      );
    }
    case 'cast':
      return <Select label="Type" value={step.type} onChange={(type) => onChange({ ...step, type: type as typeof step.type })} options={[{ id: 'float64', label: 'float64' }, { id: 'float32', label: 'float32' }]} />;
  }
}
