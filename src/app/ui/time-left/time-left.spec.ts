import { TestBed } from '@angular/core/testing';
import { TimeLeft, spanInWords } from './time-left';

const minute = 60_000;
const hour = 60 * minute;
const day = 24 * hour;

describe('spanInWords', () => {
  it.each([
    [20_000, 'under a minute'],
    [12 * minute + 59_999, '12 min'],
    [3 * hour + 24 * minute, '3 h 24 min'],
    [21 * hour, '21 h'],
    [2 * day + 3 * hour + 59 * minute, '2 d 3 h'],
    [3 * day, '3 d'],
    [12 * day + 5 * hour, '12 d'],
    [-5 * minute, '5 min'],
  ])('%d ms is %s', (span, words) => {
    expect(spanInWords(span)).toBe(words);
  });
});

describe('TimeLeft', () => {
  it('says how long until, and how long since', async () => {
    const fixture = TestBed.createComponent(TimeLeft);
    const text = () => (fixture.nativeElement as HTMLElement).textContent;
    fixture.componentRef.setInput('until', 5 * day);
    fixture.componentRef.setInput('now', 2 * day);
    await fixture.whenStable();
    expect(text()).toBe('in 3 d');
    fixture.componentRef.setInput('now', 5 * day + 2 * hour);
    await fixture.whenStable();
    expect(text()).toBe('2 h ago');
  });
});
