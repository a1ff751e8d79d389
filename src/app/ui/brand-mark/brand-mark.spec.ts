import { TestBed } from '@angular/core/testing';
import { BrandMark } from './brand-mark';

describe('BrandMark', () => {
  it('is hidden from those who hear the page, and as large as asked', async () => {
    const fixture = TestBed.createComponent(BrandMark);
    fixture.componentRef.setInput('size', 40);
    await fixture.whenStable();
    const svg = (fixture.nativeElement as HTMLElement).querySelector('svg');
    expect(svg?.getAttribute('aria-hidden')).toBe('true');
    expect(svg?.getAttribute('width')).toBe('40');
  });
});
