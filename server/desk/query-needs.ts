import type { Queryable } from '@drizzle/client';
import type { Need } from '@shared/desk';
import type { Membership } from '../access/policy';
import { waitingFor } from '../queries/present-query';

/** Mark queries that the person may answer, as one thing to do. */
export function queryNeeds(tx: Queryable, member: Membership): Need[] {
  if (member.role === 'student') return [];
  const waiting = waitingFor(tx, member.courseId, member.id);
  if (waiting === 0) return [];
  return [
    {
      id: 'queries',
      due: null,
      title: waiting === 1 ? 'One mark query waits' : `${String(waiting)} mark queries wait`,
      detail: 'Somebody who did not give the mark reads it',
      act: { label: 'Read the queries', page: 'queries', id: null },
    },
  ];
}
