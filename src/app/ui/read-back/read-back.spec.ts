import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { TestBed } from '@angular/core/testing';
import type { Reading } from '@shared/reading';
import { provideLook } from '../look';
import { ReadBack } from './read-back';
import { ReadBackHarness } from './testing/read-back-harness';

async function show(reading: Reading | null, inputs: Readonly<Record<string, unknown>> = {}) {
  TestBed.configureTestingModule({ providers: [provideLook()] });
  const fixture = TestBed.createComponent(ReadBack);
  for (const [name, value] of Object.entries({ reading, ...inputs })) fixture.componentRef.setInput(name, value);
  const chosen: string[] = [];
  fixture.componentInstance.choiceMade.subscribe((text) => chosen.push(text));
  await fixture.whenStable();
  return { harness: await TestbedHarnessEnvironment.harnessForFixture(fixture, ReadBackHarness), chosen };
}

describe('ReadBack', () => {
  it('says how an answer was read, and what was left out', async () => {
    const { harness } = await show({
      kind: 'number',
      value: 7.65e6,
      si: 7.65e6,
      readAs: '7.65 × 10⁶ s⁻¹',
      dropped: 'R =',
    });
    expect(await harness.getText()).toBe('read as 7.65 × 10⁶ s⁻¹, without “R =”');
  });

  it('asks, and hands on the choice', async () => {
    const { harness, chosen } = await show({
      kind: 'question',
      question: 'Is 4,742 a little under five, or over four thousand?',
      choices: [
        { label: '4.742', text: '4.742' },
        { label: '4 742', text: '4742' },
      ],
      at: 1,
    });
    expect(await harness.getText()).toContain('a little under five');
    expect(await harness.getChoices()).toEqual(['4.742', '4 742']);
    await harness.choose('4 742');
    expect(chosen).toEqual(['4742']);
  });

  it('names the character that cannot be read', async () => {
    const { harness } = await show({ kind: 'unreadable', problem: 'A bracket is open.', at: 11 });
    expect(await harness.getText()).toBe('A bracket is open. (character 11)');
  });

  it('adds a note beneath', async () => {
    const { harness } = await show({ kind: 'worked', text: 'x', readAs: 'x', note: 'A unit is asked for.' });
    expect(await harness.getText()).toBe('read as x / A unit is asked for.');
  });

  it('is quiet about nothing', async () => {
    expect(await (await show({ kind: 'empty' })).harness.getText()).toBe('nothing yet');
  });

  it('says why it waits', async () => {
    const { harness } = await show(null, { waiting: 'kept here, read when back' });
    expect(await harness.getText()).toBe('kept here, read when back');
  });
});
