import type { ComputedSpecification } from '@shared/answer-forms';
import type { Reading } from '@shared/reading/reading';
import { compareFormula } from './compare-formula';
import { compareNumber, compareNumberWithSlip } from './compare-number';
import { compareState } from './compare-state';
import { compareComplex, compareDistribution, compareList, compareMatrix } from './compare-values';
import type { ComputedKey } from './key-value';
import { matched, type Match } from './match';

const otherKind = matched(false);

/** Compares a reading with a key of its part. A reading of another kind than the part asks for never matches. */
export function compareWithKey(reading: Reading, key: ComputedKey, part: ComputedSpecification): Match {
  switch (part.form) {
    case 'number':
      return reading.kind === 'number' ? compareNumber(reading, key, part) : otherKind;
    case 'complex':
      return reading.kind === 'complex' ? compareComplex(reading, key, part) : otherKind;
    case 'list':
      return reading.kind === 'list' ? compareList(reading, key, part) : otherKind;
    case 'distribution':
      return reading.kind === 'list' ? compareDistribution(reading, key, part) : otherKind;
    case 'matrix':
      return reading.kind === 'matrix' ? compareMatrix(reading, key, part) : otherKind;
    case 'state':
      return reading.kind === 'state' ? compareState(reading, key, part) : otherKind;
    case 'formula':
      return reading.kind === 'formula' ? compareFormula(reading, key, part) : otherKind;
  }
}

/** Compares a reading with a slip of its part. */
export function compareWithSlip(reading: Reading, slip: ComputedKey, part: ComputedSpecification): Match {
  if (part.form === 'number' && reading.kind === 'number') return compareNumberWithSlip(reading, slip, part);
  return compareWithKey(reading, slip, part);
}
