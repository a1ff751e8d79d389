import { TestBed } from '@angular/core/testing';
import { provideLook } from '../look';
import { CountsTable } from './counts-table';
import { countsAsCsv, tallyOf } from './tally';

describe('CountsTable', () => {
  it('shows how often each number was counted', async () => {
    TestBed.configureTestingModule({ providers: [provideLook()] });
    const fixture = TestBed.createComponent(CountsTable);
    fixture.componentRef.setInput('name', 'counts');
    fixture.componentRef.setInput('symbol', 'm_j');
    fixture.componentRef.setInput('counts', [0, 2, 0, 3]);
    await fixture.whenStable();
    const rows = [...(fixture.nativeElement as HTMLElement).querySelectorAll('tr')].map((row) =>
      [...row.querySelectorAll('td')].map((cell) => cell.textContent),
    );
    expect(rows).toEqual([
      ['0', '1', '2', '3'],
      ['2', '0', '1', '1'],
    ]);
  });
});

describe('tallyOf', () => {
  it('leaves gaps out where light is bright', () => {
    expect(tallyOf([250, 3, 250])).toEqual([
      { count: 3, times: 1 },
      { count: 250, times: 2 },
    ]);
  });
});

describe('countsAsCsv', () => {
  it('writes one shot a line, in order', () => {
    expect(countsAsCsv('counts', [0, 2])).toBe('shot,counts\r\n1,0\r\n2,2\r\n');
  });
});
