import { expect, it } from 'vitest';
import { administrator, lead, markers, studentCount, students } from './accounts';

it('no two people of the demonstration share a name or an address', () => {
  const everybody = [administrator, lead, ...markers, ...students];
  expect(students).toHaveLength(studentCount);
  expect(new Set(everybody.map((each) => each.email)).size).toBe(everybody.length);
  expect(new Set(everybody.map((each) => each.name)).size).toBe(everybody.length);
});
