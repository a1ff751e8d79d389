import { TestBed } from '@angular/core/testing';
import { LoadingBars } from './loading-bars';

describe('LoadingBars', () => {
  it('keeps the place of as many rows as are expected', async () => {
    const fixture = TestBed.createComponent(LoadingBars);
    fixture.componentRef.setInput('count', 7);
    await fixture.whenStable();
    const element = fixture.nativeElement as HTMLElement;
    expect(element.querySelectorAll('.row')).toHaveLength(7);
    expect(element.textContent).toContain('On its way');
  });
});
