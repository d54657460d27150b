/** Light, dark, or as the system has it: one press goes on to the next. */
import { Button } from '../components/Button.tsx';
import { nextTheme, useThemeChoice, type ThemeChoice } from './theme-choice.ts';

const words: Record<ThemeChoice, string> = { system: 'as the system', light: 'light', dark: 'dark' };

const signs: Record<ThemeChoice, React.ReactNode> = {
  system: <><circle cx="8" cy="8" r="5.500" fill="none" stroke="currentColor" strokeWidth="1.500" /><path d="M8 2.500a5.500 5.500 0 010 11z" fill="currentColor" /></>,
  light: <><circle cx="8" cy="8" r="3" fill="none" stroke="currentColor" strokeWidth="1.500" /><path d="M8 .8v2M8 13.200v2M.8 8h2M13.200 8h2M2.900 2.900l1.400 1.400M11.700 11.700l1.400 1.400M2.900 13.100l1.400-1.400M11.700 4.300l1.400-1.400" stroke="currentColor" strokeWidth="1.500" /></>,
  dark: <path d="M13.500 9.800A6 6 0 016.200 2.500a6 6 0 107.300 7.300z" fill="none" stroke="currentColor" strokeWidth="1.500" strokeLinejoin="round" />,
};

export function ThemeSwitch() {
  const [choice, choose] = useThemeChoice();
  return (
    <Button kind="quiet" aria-label={`Theme: ${words[choice]}. Change it to ${words[nextTheme(choice)]}`} onPress={() => choose(nextTheme(choice))}>
      <svg aria-hidden viewBox="0 0 16 16" className="mx-2 size-4">{signs[choice]}</svg>
    </Button>
  );
}
