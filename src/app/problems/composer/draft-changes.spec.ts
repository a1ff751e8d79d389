import { emptyDraft } from '@shared/problem-draft';
import { defaultConvention } from '@shared/primitives';
import {
  addCriterion,
  addGiven,
  addPart,
  addSlip,
  changeAnswer,
  changeGiven,
  moveCriterion,
  movePart,
  moved,
  nextName,
  removeGiven,
  removePart,
  removeSlip,
} from './draft-changes';

let counter = 0;
const newId = () => `00000000-0000-4000-8000-${String(++counter).padStart(12, '0')}`;
const empty = emptyDraft('A splitter', defaultConvention);

describe('changes of a draft', () => {
  it('open each new part with its line in the statement', () => {
    const opened = { ...empty, statement: 'A beam.\n(a) How bright?\n' };
    expect(addPart(opened, newId).statement).toBe(opened.statement);
    const one = addPart({ ...empty, statement: 'A beam.\n' }, newId);
    const two = addPart(one, newId);
    expect(two.statement).toBe('A beam.\n(a)\n(b) ');
    expect(two.parts).toHaveLength(2);
    expect(empty.parts).toHaveLength(0);
  });

  it('move and remove parts', () => {
    const two = addPart(addPart(empty, newId), newId);
    const [first, second] = two.parts;
    expect(movePart(two, 0, 1).parts).toEqual([second, first]);
    expect(movePart(two, 1, 2).parts).toEqual(two.parts);
    expect(removePart(two, 0).parts).toEqual([second]);
  });

  it('leave alone what they do not change', () => {
    const two = addPart(addPart(empty, newId), newId);
    const changed = changeAnswer(two, 1, { key: 'nbar' });
    expect(changed.parts[0]).toBe(two.parts[0]);
    expect(changed.parts[1]?.answer.key).toBe('nbar');
    expect(changeAnswer(two, 7, { key: 'nbar' })).toBe(two);
  });

  it('add, change and remove givens and slips', () => {
    const given = changeGiven(addGiven(empty, 'T'), 0, { low: '0.1' });
    expect(given.givens[0]).toMatchObject({ name: 'T', symbol: 'T', low: '0.1' });
    expect(removeGiven(given, 0).givens).toEqual([]);
    const slip = addSlip(addPart(empty, newId), 0);
    expect(slip.parts[0]?.answer.slips).toHaveLength(1);
    expect(removeSlip(slip, 0, 0).parts[0]?.answer.slips).toEqual([]);
  });

  it('name a new criterion by its kind and the first free number', () => {
    expect(nextName([{ name: 'M1' }, { name: 'M3' }], 'M')).toBe('M2');
    const two = addCriterion(addCriterion(addPart(empty, newId), 0, 'M', newId()), 0, 'A', newId());
    expect(two.parts[0]?.criteria.map((each) => each.name)).toEqual(['A1', 'M1', 'A2']);
    expect(moveCriterion(two, 0, 1, 0).parts[0]?.criteria.map((each) => each.name)).toEqual(['M1', 'A1', 'A2']);
  });

  it('move an item within a list only', () => {
    expect(moved([1, 2, 3], 2, 0)).toEqual([3, 1, 2]);
    expect(moved([1, 2, 3], 0, -1)).toEqual([1, 2, 3]);
    expect(moved([1, 2, 3], 5, 0)).toEqual([1, 2, 3]);
  });
});
