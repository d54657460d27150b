/** Light, dark or as the system says. The choice is kept on this device; /theme.js applies it before the first paint. */
import { useEffect, useState } from 'react';

export type ThemeChoice = 'light' | 'dark' | 'system';

const key = 'pennyweight-theme';
const order: ThemeChoice[] = ['system', 'light', 'dark'];

export const nextTheme = (choice: ThemeChoice): ThemeChoice => order[(order.indexOf(choice) + 1) % order.length];

function readChoice(): ThemeChoice {
  try {
    const kept = localStorage.getItem(key);
    return kept === 'light' || kept === 'dark' ? kept : 'system';
  } catch {
    return 'system';
  }
}

function keepChoice(choice: ThemeChoice): void {
  try {
    if (choice === 'system') localStorage.removeItem(key);
    else localStorage.setItem(key, choice);
  } catch {
    // Storage is switched off: the choice holds until the page is left.
    return;
  }
}

export function useThemeChoice(): [ThemeChoice, (choice: ThemeChoice) => void] {
  const [choice, setChoice] = useState(readChoice);
  useEffect(() => {
    const system = window.matchMedia('(prefers-color-scheme: dark)');
    const apply = () => {
      document.documentElement.dataset.theme = choice === 'system' ? (system.matches ? 'dark' : 'light') : choice;
    };
    apply();
    system.addEventListener('change', apply);
    return () => system.removeEventListener('change', apply);
  }, [choice]);
  return [choice, (next) => { keepChoice(next); setChoice(next); }];
}
