import * as z from 'zod';
import { instant } from './primitives';
import { defineRoute } from './route';

/** Whether a person has a calendar address; the address itself is shown once, when it is made. */
export const calendarAddress = z.object({ madeAt: instant.nullable() });

export const calendarRoutes = {
  calendarAddress: defineRoute({
    method: 'GET',
    path: '/calendar-address',
    summary: 'Whether the signed-in person has a calendar address, and since when',
    response: calendarAddress,
  }),
  makeCalendarAddress: defineRoute({
    method: 'POST',
    path: '/calendar-address',
    summary: 'Make a calendar address; the one before ends',
    response: z.object({ address: z.string(), madeAt: instant }),
  }),
  revokeCalendarAddress: defineRoute({
    method: 'DELETE',
    path: '/calendar-address',
    summary: 'End the calendar address',
  }),
  calendar: defineRoute({
    method: 'GET',
    path: '/calendars/:address',
    summary: 'A person’s own dates as iCalendar (RFC 5545), for whoever knows the secret address',
    params: z.object({ address: z.string().max(100) }),
    response: z.string(),
    open: true,
  }),
};
