import katex from 'katex';
import { describe, expect, it } from 'vitest';
import { describeFunctions, requestOfExample } from './describe-language';
import { KeyEvaluator } from './key-task';
import { opticsFunctions } from './optics-functions';
import { plainFunctions } from './plain-functions';
import { SourceText } from './source-text';

const functions = describeFunctions();
const evaluator = new KeyEvaluator();

describe('the description of the language', () => {
  it('has every function that can be called, once, under a heading', () => {
    const names = functions.map(({ name }) => name);
    expect([...names].sort()).toEqual([...Object.keys(opticsFunctions), ...Object.keys(plainFunctions)].sort());
    expect(functions.filter(({ group, summary }) => group === '' || summary === '')).toEqual([]);
  });

  it('has formulas that can be typeset', () => {
    for (const { formula } of functions)
      expect(() => katex.renderToString(formula, { strict: 'error', throwOnError: true })).not.toThrow();
  });

  it('says of every argument what it may be', () => {
    const without = functions.flatMap(({ name, arguments: all }) =>
      all.filter(({ domain }) => domain === '').map((argument) => `${name}: ${argument.name}`),
    );
    expect(without).toEqual([]);
  });

  it.each(functions.map(({ name, example }) => [name, example ?? '']))(
    'runs the example of %s: %s',
    (name, example) => {
      expect(example).toContain(`${name}(`);
      const outcome = evaluator.evaluate(requestOfExample(example));
      expect(outcome.fault).toBeUndefined();
    },
  );

  // Each argument of each example in turn is put outside of the domain that is written beside it.
  const trials = functions.flatMap(({ name, example, arguments: all }) => {
    if (example === null) return [];
    const source = new SourceText(example);
    const places = source.argumentsAfter({ position: example.indexOf(`${name}(`), length: name.length });
    // Of a joint state the mode comes second, which the signature for one mode does not count.
    if (places.length > all.length) return [];
    return places.flatMap(({ position, length }, index) => {
      const outside = all[index]?.outside;
      if (outside === undefined) return [];
      const tried = example.slice(0, position) + outside + example.slice(position + length);
      return [[name, all[index]?.name ?? '', tried] as const];
    });
  });

  it.each(trials)('refuses for %s a value of %s outside of its domain: %s', (_name, _argument, expression) => {
    expect(evaluator.evaluate(requestOfExample(expression)).fault?.message).toBeTruthy();
  });
});
