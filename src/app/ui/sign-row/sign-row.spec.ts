import { TestBed } from '@angular/core/testing';
import { SignRow } from './sign-row';
import { signsFor, type Sign } from './signs';

async function show() {
  const fixture = TestBed.createComponent(SignRow);
  fixture.componentRef.setInput('signs', signsFor({ form: 'state' }));
  fixture.componentRef.setInput('label', 'Signs for the answer to (d)');
  const chosen: Sign[] = [];
  let wentBack = 0;
  fixture.componentInstance.chosen.subscribe((sign) => chosen.push(sign));
  fixture.componentInstance.left.subscribe(() => (wentBack += 1));
  document.body.append(fixture.nativeElement as HTMLElement);
  await fixture.whenStable();
  const buttons = [...(fixture.nativeElement as HTMLElement).querySelectorAll('button')];
  const press = async (key: string) => {
    document.activeElement?.dispatchEvent(new KeyboardEvent('keydown', { key, bubbles: true }));
    await fixture.whenStable();
  };
  return { buttons, chosen, press, wentBack: () => wentBack };
}

describe('SignRow', () => {
  it('is one stop for the keyboard, walked with the arrows', async () => {
    const { buttons, press, wentBack } = await show();
    expect(buttons.filter((button) => button.tabIndex === 0)).toHaveLength(1);
    buttons[0]?.focus();
    await press('ArrowRight');
    expect(document.activeElement).toBe(buttons[1]);
    expect(buttons.map((button) => button.tabIndex).indexOf(0)).toBe(1);
    await press('End');
    expect(document.activeElement).toBe(buttons.at(-1));
    await press('Escape');
    expect(wentBack()).toBe(1);
  });

  it('hands on the sign, named for those who cannot see it, and leaves the cursor where it is', async () => {
    const { buttons, chosen } = await show();
    const ket = buttons.find((button) => button.getAttribute('aria-label') === 'ket')!;
    const down = new MouseEvent('mousedown', { cancelable: true });
    ket.dispatchEvent(down);
    ket.click();
    expect(down.defaultPrevented).toBe(true);
    expect(chosen.map(({ text }) => text)).toEqual(['|⟩']);
  });
});
