import { useCallback, useSyncExternalStore } from 'react';

export type Theme = 'light' | 'dark';

const STORAGE_KEY = 'gustloom.theme';
const listeners = new Set<() => void>();

const current = (): Theme => (document.documentElement.dataset.theme === 'dark' ? 'dark' : 'light');

const show = (theme: Theme) => {
  document.documentElement.dataset.theme = theme;
  for (const listener of listeners) listener();
};

/** Called before the first paint: what the person chose, else what the system asks for. */
export const startTheme = (): void => {
  const chosen = localStorage.getItem(STORAGE_KEY);
  const dark = chosen ? chosen === 'dark' : matchMedia('(prefers-color-scheme: dark)').matches;
  show(dark ? 'dark' : 'light');
};

const subscribe = (listener: () => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

export function useTheme(): [Theme, (theme: Theme) => void] {
  const theme = useSyncExternalStore(subscribe, current);
  const setTheme = useCallback((next: Theme) => {
    localStorage.setItem(STORAGE_KEY, next);
    show(next);
  }, []);
  return [theme, setTheme];
}
