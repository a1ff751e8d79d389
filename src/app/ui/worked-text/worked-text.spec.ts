import { TestBed } from '@angular/core/testing';
import { provideLook } from '../look';
import { WorkedText } from './worked-text';

async function show(text: string) {
  TestBed.configureTestingModule({ providers: [provideLook()] });
  const fixture = TestBed.createComponent(WorkedText);
  fixture.componentRef.setInput('label', 'Answer to (e)');
  fixture.componentRef.setInput('text', text);
  const readings: string[] = [];
  fixture.componentInstance.readingChange.subscribe((reading) => readings.push(reading.kind));
  await fixture.whenStable();
  return { fixture, root: fixture.nativeElement as HTMLElement, readings };
}

describe('WorkedText', () => {
  it('shows beneath how formulas will be read', async () => {
    const { root, readings } = await show('It is $\\sqrt{\\bar n}$.');
    const read = root.querySelector('section');
    expect(read?.getAttribute('aria-label')).toBe('How this will be read');
    expect(read?.querySelector('.katex')).not.toBeNull();
    expect(readings.at(-1)).toBe('worked');
  });

  it('does not repeat plain words', async () => {
    const { root } = await show('Plain words say it.');
    expect(root.querySelector('section')).toBeNull();
  });

  it('names a formula that cannot be read', async () => {
    const { root } = await show('$\\frac{1}$ is not whole');
    expect(root.querySelector('.tone-wrong')?.textContent).toContain('\\frac{1}');
  });

  it('writes signs at the cursor', async () => {
    const { fixture, root } = await show('');
    const area = root.querySelector('textarea')!;
    document.body.append(root);
    area.focus();
    await fixture.whenStable();
    root.querySelector<HTMLButtonElement>('[aria-label="formula"]')?.click();
    expect(area.value).toBe('$$');
    expect(area.selectionStart).toBe(1);
    expect(fixture.componentInstance.text()).toBe('$$');
  });
});
