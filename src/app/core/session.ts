import { Injectable, computed, inject, signal } from '@angular/core';
import { firstValueFrom } from 'rxjs';
import type { Session as SessionState, SessionCourse } from '@shared/accounts';
import type { Role } from '@shared/primitives';
import { AccountsApi } from './api/accounts-api';
import { SessionEnd } from './session-end';

/** Who is signed in, and in which course they are. */
@Injectable({ providedIn: 'root' })
export class Session {
  private readonly api = inject(AccountsApi);
  private readonly sessionEnd = inject(SessionEnd);
  private readonly state = signal<SessionState | null>(null);
  private readonly currentCourseId = signal<string | null>(null);
  private loading: Promise<void> | null = null;

  readonly person = computed(() => this.state()?.person ?? null);
  readonly courses = computed(() => this.state()?.courses ?? []);

  /** The course of the page that is shown; null on pages that belong to none. */
  readonly course = computed<SessionCourse | null>(() => this.courseOf(this.currentCourseId()));

  /** The person's role in the course of the page. */
  readonly role = computed<Role | null>(() => this.course()?.role ?? null);

  /** Loads the session once; guards wait for it. */
  load(): Promise<void> {
    this.loading ??= this.refresh();
    return this.loading;
  }

  /** Asks the server again, for example when a course was created. */
  async refresh(): Promise<void> {
    const { session } = await firstValueFrom(this.api.session());
    this.state.set(session);
  }

  async signIn(email: string, password: string): Promise<void> {
    this.take(await firstValueFrom(this.api.signIn(email, password)));
  }

  /** Takes the session that a sign-in or a link from a letter gave. */
  take(session: SessionState): void {
    this.state.set(session);
    this.loading = Promise.resolve();
    this.sessionEnd.forget();
  }

  async signOut(everywhere = false): Promise<void> {
    await firstValueFrom(everywhere ? this.api.signOutEverywhere() : this.api.signOut());
    this.state.set(null);
    this.currentCourseId.set(null);
  }

  /** Says to which course the page belongs. */
  enter(courseId: string | null): void {
    this.currentCourseId.set(courseId);
  }

  courseOf(courseId: string | null): SessionCourse | null {
    return this.courses().find((each) => each.courseId === courseId) ?? null;
  }
}
