/** The steps of a recipe in order, each with its parameters and what it changes. */
import type { Draft, Preview } from '#contract/dataset.ts';
import type { Recipe, RecipeStep } from '#contract/recipe.ts';
import { Button } from '../../components/Button.tsx';
import { missingSteps, moveStep, removeStep, setStep, starter } from './recipe-edit.ts';
import { StepForm } from './StepForm.tsx';
import { stepSentence, stepTitles } from './step-words.ts';

interface Props {
  campaign: string;
  recipe: Recipe;
  sources: Draft['sources'];
  effects: Preview['steps'];
  onChange?: (recipe: Recipe) => void;
}

export function RecipeSteps({ campaign, recipe, sources, effects, onChange }: Props) {
  const addable = missingSteps(recipe);
  return (
    <section aria-labelledby="steps-title" className="space-y-4">
      <h2 id="steps-title" className="text-xl">Steps</h2>
      <ol className="divide-y divide-rule border-y border-rule">
        {recipe.steps.map((step: RecipeStep, i) => (
          <li key={step.step} className="grid gap-x-6 gap-y-2 py-4 sm:grid-cols-[2.5rem_1fr]">
            <span aria-hidden className="font-mono text-ink-soft">{i + 1}</span>
            <div className="min-w-0 space-y-3">
              <div className="flex flex-wrap items-baseline justify-between gap-2">
                <h3 className="font-medium">{stepTitles[step.step]}</h3>
                {onChange && step.step !== 'select' && (
                  <div className="flex gap-1">
                    <Button kind="quiet" aria-label={`Move ${step.step} earlier`} isDisabled={i <= 1} onPress={() => onChange(moveStep(recipe, i, -1))}>Earlier</Button>
                    <Button kind="quiet" aria-label={`Move ${step.step} later`} isDisabled={i === recipe.steps.length - 1} onPress={() => onChange(moveStep(recipe, i, 1))}>Later</Button>
                    <Button kind="quiet" aria-label={`Remove ${step.step}`} onPress={() => onChange(removeStep(recipe, step.step))}>Remove</Button>
                  </div>
                )}
              </div>
              {onChange ? <StepForm campaign={campaign} step={step} sources={sources} onChange={(next) => onChange(setStep(recipe, next))} /> : <p>{stepSentence(step, sources)}</p>}
              {effects[i] && effects[i].step === step.step && <p className="text-sm text-ink-soft">{effects[i].sentence}</p>}
            </div>
          </li>
        ))}
      </ol>
      {onChange && addable.length > 0 && (
        <div className="flex flex-wrap items-center gap-2">
          <span className="text-sm text-ink-soft">Add a step:</span>
          {addable.map((name) => <Button key={name} kind="plain" onPress={() => onChange(setStep(recipe, starter(name)))}>{stepTitles[name]}</Button>)}
        </div>
      )}
    </section>
  );
}
