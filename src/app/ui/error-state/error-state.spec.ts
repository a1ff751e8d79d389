import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { MatButtonHarness } from '@angular/material/button/testing';
import { provideLook } from '../look';
import { ErrorState } from './error-state';

describe('ErrorState', () => {
  it('says what happened and what was kept, and tries again', async () => {
    TestBed.configureTestingModule({ providers: [provideLook()] });
    const fixture = TestBed.createComponent(ErrorState);
    fixture.componentRef.setInput('text', 'The server does not answer.');
    fixture.componentRef.setInput('kept', 'Your draft is kept here.');
    let tries = 0;
    fixture.componentInstance.retried.subscribe(() => tries++);
    await fixture.whenStable();
    const text = (fixture.nativeElement as HTMLElement).textContent;
    expect(text).toContain('The server does not answer.');
    expect(text).toContain('Your draft is kept here.');
    const button = await TestbedHarnessEnvironment.loader(fixture).getHarness(
      MatButtonHarness.with({ text: 'Try again' }),
    );
    await button.click();
    expect(tries).toBe(1);
  });
});
