import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import { Session } from '../../core/session';

/** For somebody who is in no course: says what comes next. */
@Component({
  selector: 'app-no-course',
  imports: [MatButtonModule, RouterLink],
  template: `
    <section>
      @if (session.person()?.isAdministrator) {
        <h1>Begin with a course</h1>
        <p>
          Nothing is set up yet. Create the first course; you will be its lead, and can make somebody else lead and take
          yourself out again.
        </p>
        <p>After that: add people, write a problem, build a set from it.</p>
        <div><a matButton="filled" routerLink="/courses/new">Create the first course</a></div>
      } @else {
        <h1>You are in no course yet</h1>
        <p>The lead of your course adds you; a letter tells you when it is done. Then its sheets and marks are here.</p>
      }
    </section>
  `,
  styles: `
    section {
      display: grid;
      gap: 16px;
      max-width: 65ch;
      padding: 48px;
    }
    @media (max-width: 600px) {
      section {
        padding: 24px 16px;
      }
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class NoCourse {
  protected readonly session = inject(Session);
}
