/**
 * For a text field whose value is kept in the address. The router changes the address in a transition, so the kept value comes too late
 * for the next key: while the field has the focus it shows what is typed, and what is kept again once it is left.
 * `<TextField label="Find" {...useTrailingText(state.find, (find) => setState({ find }))} />`
 */
import { useState } from 'react';

export function useTrailingText(kept: string, keep: (text: string) => void) {
  const [typed, setTyped] = useState<string | null>(null);
  return {
    value: typed ?? kept,
    onChange: (text: string) => {
      setTyped(text);
      keep(text);
    },
    onBlur: () => setTyped(null),
  };
}
