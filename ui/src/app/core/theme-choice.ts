import { DOCUMENT, effect, inject, Injectable, signal } from '@angular/core';

export const THEMES = ['system', 'light', 'dark'] as const;
export type Theme = (typeof THEMES)[number];

const KEY = 'leanyear.theme';

function stored(): Theme {
  const kept = localStorage.getItem(KEY);
  return THEMES.find((theme) => theme === kept) ?? 'system';
}

/** Light, dark, or as the system has it; kept in this browser. */
@Injectable({ providedIn: 'root' })
export class ThemeChoice {
  private readonly document = inject(DOCUMENT);
  private readonly chosen = signal<Theme>(stored());
  readonly theme = this.chosen.asReadonly();
  /** Whether the page is dark now: charts are painted, not styled, and must be told. */
  readonly dark = signal(false);

  constructor() {
    const system = this.document.defaultView?.matchMedia('(prefers-color-scheme: dark)');
    const systemDark = signal(system?.matches ?? false);
    system?.addEventListener('change', (event) => systemDark.set(event.matches));
    effect(() => {
      const theme = this.chosen();
      this.dark.set(theme === 'system' ? systemDark() : theme === 'dark');
      if (theme === 'system') delete this.document.documentElement.dataset['theme'];
      else this.document.documentElement.dataset['theme'] = theme;
    });
  }

  choose(theme: Theme): void {
    this.chosen.set(theme);
    localStorage.setItem(KEY, theme);
  }
}
