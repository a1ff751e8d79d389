import { describe, expect, it } from 'vitest';
import { countPlaywright, countVitest, judgeRunner, totalLine } from './count-results.mjs';

const vitestReport = {
  numPassedTests: 40,
  numFailedTests: 2,
  numPendingTests: 1,
  numTodoTests: 0,
  testResults: [
    { status: 'passed', assertionResults: [{}] },
    { status: 'failed', assertionResults: [{}, {}] },
  ],
};

describe('countVitest', () => {
  it('reads what passed, failed and was skipped', () => {
    expect(countVitest(vitestReport)).toEqual({ passed: 40, failed: 2, skipped: 1 });
  });

  it('counts a file that cannot be loaded as one that failed', () => {
    const testResults = [...vitestReport.testResults, { status: 'failed', assertionResults: [] }];
    expect(countVitest({ ...vitestReport, testResults }).failed).toBe(3);
  });

  it('refuses a report of another form rather than counting nothing', () => {
    expect(() => countVitest({ passed: 3 })).toThrow('counts');
  });
});

describe('countPlaywright', () => {
  it('counts a test that passed only the second time as failed', () => {
    const stats = { expected: 7, unexpected: 1, flaky: 1, skipped: 2 };
    expect(countPlaywright({ stats, errors: [] })).toEqual({ passed: 7, failed: 2, skipped: 2 });
  });

  it('counts errors outside tests', () => {
    const stats = { expected: 0, unexpected: 0, flaky: 0, skipped: 0 };
    expect(countPlaywright({ stats, errors: [{ message: 'The server did not start.' }] }).failed).toBe(1);
  });
});

describe('judgeRunner', () => {
  const good = { passed: 5, failed: 0, skipped: 0 };

  it('leaves a runner that ended well as it is', () => {
    expect(judgeRunner(good, 0)).toEqual({ ...good, remark: '' });
  });

  it('fails a runner without a report', () => {
    expect(judgeRunner(null, 0)).toMatchObject({ failed: 1, remark: 'left no report' });
  });

  it('fails a runner that ran nothing, skipped tests or not', () => {
    expect(judgeRunner({ passed: 0, failed: 0, skipped: 3 }, 0)).toMatchObject({ failed: 1, remark: 'ran no test' });
  });

  it('fails a runner that ends badly though all its tests passed', () => {
    expect(judgeRunner(good, 1)).toMatchObject({ passed: 5, failed: 1 });
  });

  it('does not count a failure twice', () => {
    expect(judgeRunner({ passed: 5, failed: 2, skipped: 0 }, 1).failed).toBe(2);
  });
});

describe('totalLine', () => {
  it('sums over runners and gates', () => {
    const results = [
      { passed: 1, failed: 0 },
      { passed: 0, failed: 1 },
      { passed: 120, failed: 3 },
    ];
    expect(totalLine(results)).toBe('121 passed, 4 failed');
  });

  it('is a line even when nothing ran', () => {
    expect(totalLine([])).toBe('0 passed, 0 failed');
  });
});
