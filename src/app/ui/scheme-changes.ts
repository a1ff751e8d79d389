import { DOCUMENT, DestroyRef, type Signal, inject, signal } from '@angular/core';

/** Counts the changes between light and dark, for what is drawn in colours that a canvas has to read. */
export function injectSchemeChanges(): Signal<number> {
  const root = inject(DOCUMENT).documentElement;
  const destroyed = inject(DestroyRef);
  const changes = signal(0);
  const count = () => changes.update((before) => before + 1);
  const observer = new MutationObserver(count);
  observer.observe(root, { attributeFilter: ['data-theme'] });
  const system = typeof matchMedia === 'function' ? matchMedia('(prefers-color-scheme: dark)') : null;
  system?.addEventListener('change', count);
  destroyed.onDestroy(() => {
    observer.disconnect();
    system?.removeEventListener('change', count);
  });
  return changes.asReadonly();
}
