export { compileKey, reservedNames, type CompiledKey, type CompileOptions } from './compile-key';
export { evaluateKey, evaluateState, readGivens, type KeyResult } from './evaluate-key';
export { KeyError, type KeyFault } from './key-error';
export { createKeyPool, type KeyPool } from './key-pool';
export { KeyEvaluator, type KeyOutcome, type KeyRequest } from './key-task';
export { keySignatures, type KeySignature } from './signatures';
export type { GivenValue, PlainValue, Value } from './value';
