export { readAnswer } from './read-answer';
export { readUnit } from './unit-part';
export { printComplex, printNumber } from './print';
export type {
  AnswerField,
  FieldVariable,
  Reading,
  ReadingOf,
  ReadUnit,
  KetComponent,
  CoherentComponent,
} from './reading';
