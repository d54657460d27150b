/** Light, dark, or as the system has it; kept in this browser. */
import { useEffect, useState } from 'react';
import { Button } from '../components/Button.tsx';

type Choice = 'system' | 'light' | 'dark';
const key = 'pennyweight-theme';
const next: Record<Choice, Choice> = { system: 'light', light: 'dark', dark: 'system' };

function stored(): Choice {
  const value = localStorage.getItem(key);
  return value === 'light' || value === 'dark' ? value : 'system';
}

export function ThemeSwitch() {
  const [choice, setChoice] = useState<Choice>(stored);
  useEffect(() => {
    const system = matchMedia('(prefers-color-scheme: dark)');
    const apply = () => { document.documentElement.dataset.theme = choice === 'dark' || (choice === 'system' && system.matches) ? 'dark' : 'light'; };
    if (choice === 'system') localStorage.removeItem(key);
    else localStorage.setItem(key, choice);
    apply();
    system.addEventListener('change', apply);
    return () => system.removeEventListener('change', apply);
  }, [choice]);
  return <Button kind="quiet" aria-label={`Theme: ${choice}. Change it to ${next[choice]}`} onPress={() => setChoice(next[choice])}>{choice === 'system' ? 'Auto' : choice === 'light' ? 'Light' : 'Dark'}</Button>;
}
