import { askAboutComma } from './ask-comma';
import { longestAnswer } from './lexer';
import { AmbiguousComma, ReadingProblem } from './problem';
import { readChoice } from './read-choice';
import { readFormula } from './read-formula';
import { readList } from './read-list';
import { readMatrix } from './read-matrix';
import { readState } from './read-state';
import { readComplex, readNumber } from './read-number';
import type { AnswerField, Reading } from './reading';

const blank = /^[\s\u200b-\u200f\u2060\ufeff]*$/u;

function read(text: string, field: AnswerField): Reading {
  switch (field.form) {
    case 'number':
      return readNumber(text, field);
    case 'complex':
      return readComplex(text);
    case 'list':
    case 'distribution':
      return readList(text, field.form);
    case 'matrix':
      return readMatrix(text);
    case 'state':
      return readState(text);
    case 'formula':
      return readFormula(text, field.variables);
    case 'choice':
      return readChoice(text, field.labels);
    case 'worked':
      return { kind: 'worked', text, readAs: text.trim() };
  }
}

/**
 * Reads an answer under what is printed beside its field, the same way in browser and server. It never throws: what
 * cannot be read comes back with a sentence and the place; what can be read in two ways comes back as a question.
 */
export function readAnswer(text: string, field: AnswerField): Reading {
  if (blank.test(text)) return { kind: 'empty' };
  if (text.length > longestAnswer && field.form !== 'worked') {
    return {
      kind: 'unreadable',
      problem: `The answer is longer than ${longestAnswer} characters.`,
      at: longestAnswer + 1,
    };
  }
  try {
    return read(text, field);
  } catch (error) {
    if (error instanceof AmbiguousComma) return askAboutComma(text, error);
    if (!(error instanceof ReadingProblem)) throw error;
    return { kind: 'unreadable', problem: error.message, ...(error.at === undefined ? {} : { at: error.at + 1 }) };
  }
}
