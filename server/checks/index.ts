export { checkAnswer, type CheckInput, type PartKeys } from './check-answer';
export type { Check, Verdict } from './check';
export { comparedPoints, formulaPoints } from './formula-points';
export { KeyProblem, type ComputedKey, type FormulaKey, type PlainKey, type StateKey } from './key-value';
export { groupChecks } from './patterns';
export { noRelation } from './relation';
export type { OtherKey } from './relation-of';
export type { Relation } from './relation';
export type { DifferingPoint } from './match';
