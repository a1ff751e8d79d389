import { TestBed } from '@angular/core/testing';
import { MarkerToken, hueClass } from './marker-token';

describe('MarkerToken', () => {
  it('shows initials with the name behind them', async () => {
    const fixture = TestBed.createComponent(MarkerToken);
    fixture.componentRef.setInput('name', 'Iwo Brandt');
    fixture.componentRef.setInput('initials', 'IB');
    fixture.componentRef.setInput('hue', 1);
    await fixture.whenStable();
    const token = (fixture.nativeElement as HTMLElement).querySelector('abbr');
    expect(token?.textContent).toBe('IB');
    expect(token?.title).toBe('Iwo Brandt');
  });

  it('keeps to eight hues, and one of its own for the reader', () => {
    expect([1, 8, 9, 0].map((hue) => hueClass(hue))).toEqual(['hue-1', 'hue-8', 'hue-1', 'hue-1']);
    expect(hueClass(3, true)).toBe('mine');
  });
});
