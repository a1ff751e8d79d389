import { DestroyRef, ElementRef, type Signal, afterNextRender, inject, signal } from '@angular/core';

/**
 * The width of the component's own element in CSS pixels, as a signal that follows it. Until the element is on the page, or
 * where nothing can be measured, it is `assumed`.
 */
export function injectElementWidth(assumed: number): Signal<number> {
  const host = inject<ElementRef<HTMLElement>>(ElementRef).nativeElement;
  const destroyed = inject(DestroyRef);
  const width = signal(assumed);
  const take = (measured: number) => {
    if (measured > 0) width.set(Math.round(measured));
  };
  afterNextRender(() => {
    take(host.clientWidth);
    if (typeof ResizeObserver === 'undefined') return;
    const observer = new ResizeObserver(([entry]) => {
      if (entry) take(entry.contentRect.width);
    });
    observer.observe(host);
    destroyed.onDestroy(() => observer.disconnect());
  });
  return width.asReadonly();
}
