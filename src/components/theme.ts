/** Day or night colours: the person's choice, else the system's. */
const KEY = 'elbowroom.theme';
type Theme = 'light' | 'dark';

function chosen(): Theme | null {
  const stored = localStorage.getItem(KEY);
  return stored === 'light' || stored === 'dark' ? stored : null;
}

export function currentTheme(): Theme {
  return chosen() ?? (matchMedia('(prefers-color-scheme: dark)').matches ? 'dark' : 'light');
}

export function applyTheme(): void {
  document.documentElement.dataset.theme = currentTheme();
}

/** Returns the new theme. */
export function toggleTheme(): Theme {
  const next = currentTheme() === 'dark' ? 'light' : 'dark';
  localStorage.setItem(KEY, next);
  applyTheme();
  window.dispatchEvent(new Event('elbowroom-theme'));
  return next;
}

/** Calls back when the colours change, so that the 3D view can read its inks again. */
export function onTheme(listener: () => void): () => void {
  window.addEventListener('elbowroom-theme', listener);
  return () => window.removeEventListener('elbowroom-theme', listener);
}
