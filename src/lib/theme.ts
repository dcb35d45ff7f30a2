export type Theme = 'paper' | 'slate' | 'system';
const KEY = 'analemma-theme';

export const storedTheme = (): Theme => {
  const value = localStorage.getItem(KEY);
  return value === 'paper' || value === 'slate' ? value : 'system';
};

/** Paper, slate, or what the system prefers. */
export function applyTheme(theme: Theme): void {
  if (theme === 'system') {
    localStorage.removeItem(KEY);
    delete document.documentElement.dataset.theme;
  } else {
    localStorage.setItem(KEY, theme);
    document.documentElement.dataset.theme = theme;
  }
}
