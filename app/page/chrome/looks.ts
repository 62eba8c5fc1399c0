import { signal } from '@preact/signals';
import type { Preferences } from '../../shared/preferences.ts';

const systemDark = window.matchMedia('(prefers-color-scheme: dark)');
let applied: Preferences | null = null;

/** The ground in use; charts read their colours anew when it changes. */
export const theme = signal<'light' | 'dark'>('light');

/** Puts ground and text size in effect. */
export function applyLooks(preferences: Preferences | null): void {
  applied = preferences;
  const wanted = preferences?.theme ?? 'system';
  const dark = wanted === 'dark' || (wanted === 'system' && systemDark.matches);
  document.documentElement.dataset['theme'] = dark ? 'dark' : 'light';
  document.documentElement.style.setProperty('--text-scale', String((preferences?.textPercent ?? 100) / 100));
  theme.value = dark ? 'dark' : 'light';
}

systemDark.addEventListener('change', () => applyLooks(applied));
