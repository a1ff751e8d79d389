import { TestbedHarnessEnvironment } from '@angular/cdk/testing/testbed';
import { Component, signal } from '@angular/core';
import { TestBed } from '@angular/core/testing';
import type { Reading } from '@shared/reading';
import { provideLook } from '../look';
import { AnswerField, type TypedField, hintOf } from './answer-field';
import { AnswerFieldHarness } from './testing/answer-field-harness';

@Component({
  imports: [AnswerField],
  template: `<app-answer-field
    label="Answer to (b)"
    [field]="field()"
    [(text)]="text"
    (readingChange)="reading = $event"
  />`,
})
class Sheet {
  readonly field = signal<TypedField>({ form: 'number', hint: 'pure number' });
  readonly text = signal('');
  reading?: Reading;
}

async function show() {
  TestBed.configureTestingModule({ providers: [provideLook()] });
  const fixture = TestBed.createComponent(Sheet);
  await fixture.whenStable();
  const field = await TestbedHarnessEnvironment.loader(fixture).getHarness(
    AnswerFieldHarness.with({ label: 'Answer to (b)' }),
  );
  return { field, sheet: fixture.componentInstance };
}

describe('AnswerField', () => {
  it('reads what is typed', async () => {
    const { field, sheet } = await show();
    expect(await (await field.getReadBack()).getText()).toBe('nothing yet');
    await field.type('0.30');
    expect(sheet.text()).toBe('0.30');
    expect(sheet.reading).toMatchObject({ kind: 'number', value: 0.3 });
    expect(await (await field.getReadBack()).getText()).toContain('read as 0.30');
  });

  it('lets a question be answered by a button', async () => {
    const { field, sheet } = await show();
    await field.type('4,742');
    const readBack = await field.getReadBack();
    const [first] = await readBack.getChoices();
    await readBack.choose(first ?? '');
    expect(sheet.reading?.kind).toBe('number');
    expect(await field.getValue()).toBe(sheet.text());
  });

  it('says what is asked for', async () => {
    const { field } = await show();
    expect(await field.getHint()).toBe('a pure number');
    expect(hintOf({ form: 'number', hint: 'with a unit' })).toBe('with a unit');
    expect(hintOf({ form: 'number', hint: 'with a unit', unit: 's⁻¹' })).toBe('in s⁻¹');
    expect(hintOf({ form: 'state' })).toBe('a state');
  });
});
