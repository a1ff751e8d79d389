import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { provideLook } from '../look';
import { CriterionToggle } from './criterion-toggle';
import { CriterionToggleHarness } from './testing/criterion-toggle-harness';

async function show(inputs: Readonly<Record<string, unknown>> = {}) {
  TestBed.configureTestingModule({ providers: [provideLook()] });
  const fixture = TestBed.createComponent(CriterionToggle);
  for (const [name, value] of Object.entries({ name: 'M1', marks: 1, keyCap: 'a', ...inputs })) {
    fixture.componentRef.setInput(name, value);
  }
  await fixture.whenStable();
  return {
    criterion: fixture.componentInstance,
    harness: await TestbedHarnessEnvironment.harnessForFixture(fixture, CriterionToggleHarness),
  };
}

describe('CriterionToggle', () => {
  it('is awarded and taken back, and says so in words', async () => {
    const { harness, criterion } = await show();
    expect(await harness.getWords()).toBe('not awarded');
    await harness.toggle();
    expect(await harness.isAwarded()).toBe(true);
    expect(await harness.getWords()).toBe('awarded');
    expect(criterion.awarded()).toBe(true);
    await harness.toggle();
    expect(criterion.awarded()).toBe(false);
  });

  it('stays as it is where it can only be read', async () => {
    const { harness, criterion } = await show({ disabled: true });
    criterion.toggle();
    expect(await harness.isAwarded()).toBe(false);
  });
});
