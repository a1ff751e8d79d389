import { describe, expect, it } from 'vitest';
import { isOlder, missingForCompiling } from './check-machine.mjs';

describe('isOlder', () => {
  it.each([
    ['18.19.0', true],
    ['20.9.0', true],
    ['20.19.9', true],
    ['20.20.0', false],
    ['20.20.2', false],
    ['22.1.0', false],
  ])('%s', (version, expected) => {
    expect(isOlder(version, '20.20.0')).toBe(expected);
  });
});

describe('missingForCompiling', () => {
  const having =
    (...commands: string[]) =>
    (command: string) =>
      commands.includes(command);

  it('names nothing when one compiler, make and Python are there', () => {
    expect(missingForCompiling(having('clang++', 'make', 'python3'), 'linux')).toEqual([]);
  });

  it('names each thing that is missing', () => {
    expect(missingForCompiling(having(), 'linux')).toEqual(['a C++ compiler', 'make', 'Python 3']);
    expect(missingForCompiling(having('g++', 'make'), 'darwin')).toEqual(['Python 3']);
  });
});
