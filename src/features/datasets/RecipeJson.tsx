/** The recipe as JSON: to read, copy, or edit by hand; checked with the server's schema while typing. */
import { useState } from 'react';
import { recipe as recipeSchema, type Recipe } from '#contract/recipe.ts';
import { Button } from '../../components/Button.tsx';
import { CodeBlock } from '../../components/CodeBlock.tsx';
import { TextField } from '../../components/TextField.tsx';

function read(text: string): { recipe: Recipe | null; complaint: string | undefined } {
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (error) {
    return { recipe: null, complaint: `This is not JSON: ${error instanceof Error ? error.message : ''}` };
  }
  const checked = recipeSchema.safeParse(value);
  if (checked.success) return { recipe: checked.data, complaint: undefined };
  const issue = checked.error.issues[0]!;
  return { recipe: null, complaint: `${issue.path.join('.') || 'recipe'}: ${issue.message}` };
}

export function RecipeJson({ recipe, onChange }: { recipe: Recipe; onChange?: (recipe: Recipe) => void }) {
  const shown = JSON.stringify(recipe, null, 2);
  const [text, setText] = useState<string | null>(null);
  const typed = text === null ? null : read(text);
  return (
    <details>
      <summary className="cursor-pointer text-lg">The recipe as JSON</summary>
      <div className="mt-3 space-y-3">
        {text === null ? <CodeBlock text={shown} label="Recipe" /> : <TextField label="Recipe" multiline rows={24} mono value={text} onChange={setText} error={typed?.complaint} />}
        {onChange && (text === null ? <Button kind="plain" onPress={() => setText(shown)}>Edit by hand</Button> : (
          <div className="flex gap-2">
            <Button kind="primary" isDisabled={!typed?.recipe} onPress={() => { if (typed?.recipe) { onChange(typed.recipe); setText(null); } }}>Use this recipe</Button>
            <Button kind="quiet" onPress={() => setText(null)}>Cancel</Button>
          </div>
        ))}
      </div>
    </details>
  );
}
