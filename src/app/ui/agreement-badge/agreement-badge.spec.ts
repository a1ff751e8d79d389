import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import { type Agreement, agreementInWords, ordinal } from './agreement';
import { AgreementBadge } from './agreement-badge';
import { AgreementBadgeHarness } from './testing/agreement-badge-harness';

async function show(agreement: Agreement | null, inputs: Readonly<Record<string, unknown>> = {}) {
  const fixture = TestBed.createComponent(AgreementBadge);
  for (const [name, value] of Object.entries({ agreement, ...inputs })) fixture.componentRef.setInput(name, value);
  await fixture.whenStable();
  return TestbedHarnessEnvironment.harnessForFixture(fixture, AgreementBadgeHarness);
}

describe('AgreementBadge', () => {
  it('opens method, dimension and outside weight', async () => {
    const badge = await show({
      methods: ['phase space', 'number basis'],
      digits: 13,
      dimension: 32,
      outsideWeight: 3e-17,
    });
    expect(await badge.getText()).toBe('two methods agree to 13 digits');
    expect(await badge.getDetails()).toBeNull();
    await badge.toggle();
    const details = await badge.getDetails();
    expect(details).toContain('phase space, number basis');
    expect(details).toContain('32');
    expect(details).toContain('below 3 × 10⁻¹⁷');
    await badge.toggle();
    expect(await badge.getDetails()).toBeNull();
  });

  it('says how long it has been computing', async () => {
    expect(await (await show(null, { seconds: 0.8 })).getText()).toBe('computing, 0.8 s');
  });
});

describe('agreementInWords', () => {
  it.each([
    [{ methods: ['a', 'b'], digits: 15 }, 'two methods agree to 15 digits'],
    [{ methods: ['number basis'], dimension: 20 }, 'one method, number basis, dimension 20'],
    [{ methods: ['a', 'b'], digits: 6, differs: true }, 'the methods differ from the 7th digit on'],
    [{ methods: ['plain algebra'] }, 'one method, plain algebra'],
  ] as const)('%o', (agreement, words) => {
    expect(agreementInWords(agreement)).toBe(words);
  });
});

describe('ordinal', () => {
  it('knows the exceptions', () => {
    expect([1, 2, 3, 4, 11, 12, 13, 21, 112].map(ordinal).join()).toBe('1st,2nd,3rd,4th,11th,12th,13th,21st,112th');
  });
});
