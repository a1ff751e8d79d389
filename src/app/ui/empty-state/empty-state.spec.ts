import { TestBed } from '@angular/core/testing';
import { EmptyState } from './empty-state';

describe('EmptyState', () => {
  it('says what to do next', async () => {
    const fixture = TestBed.createComponent(EmptyState);
    fixture.componentRef.setInput('text', 'No problem yet. Write the first one.');
    await fixture.whenStable();
    expect((fixture.nativeElement as HTMLElement).textContent).toContain('Write the first one.');
  });
});
