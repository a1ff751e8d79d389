import { Injectable, inject } from '@angular/core';
import { calendarRoutes } from '@shared/calendar';
import { ApiClient } from './api-client';

/** The secret address of a person's calendar. */
@Injectable({ providedIn: 'root' })
export class CalendarApi {
  private readonly api = inject(ApiClient);

  address() {
    return this.api.call(calendarRoutes.calendarAddress);
  }

  make() {
    return this.api.call(calendarRoutes.makeCalendarAddress);
  }

  revoke() {
    return this.api.call(calendarRoutes.revokeCalendarAddress);
  }
}
