import { describe, expect, it } from 'vitest';
import { splitLint } from './lint-report.mjs';

describe('splitLint', () => {
  it('sets broken directions apart from the rest, a line each', () => {
    const messages = [
      { ruleId: 'boundaries/dependencies', line: 3, column: 7, message: 'shared may not import from server.' },
      { ruleId: 'eqeqeq', line: 9, column: 1, message: 'Expected ===.' },
      { ruleId: null, message: 'Parsing error.' },
    ];
    expect(splitLint([{ filePath: '/project/shared/a.ts', messages }], '/project')).toEqual({
      directions: 'shared/a.ts:3:7 shared may not import from server. (boundaries/dependencies)',
      others: 'shared/a.ts:9:1 Expected ===. (eqeqeq)\nshared/a.ts:0:0 Parsing error. (cannot be read)',
    });
  });

  it('is empty when nothing was found', () => {
    expect(splitLint([{ filePath: '/project/a.ts', messages: [] }], '/project')).toEqual({
      directions: '',
      others: '',
    });
  });
});
