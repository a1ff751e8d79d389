import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import type { RoleOfDoer } from '@shared/own-data';
import { fullMomentOf } from '@shared/times';
import { OwnDataApi } from '../../core/api/own-data-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';

/** How a role is said of somebody who is not named. */
const roleWords: Readonly<Record<RoleOfDoer, string>> = {
  you: 'You',
  lead: 'A lead',
  marker: 'A marker',
  student: 'A student',
  administrator: 'An administrator',
  'the server': 'The server',
  'somebody who left': 'Somebody who has left the team',
};

/** Most looks that are listed; the file holds all. */
const mostShown = 20;

/** What is held about a person, as a file; and in which role others looked at their scripts after release. */
@Component({
  selector: 'app-own-data',
  imports: [MatButtonModule, MatIconModule],
  templateUrl: './own-data.html',
  styleUrl: './own-data.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class OwnData {
  private readonly api = inject(OwnDataApi);
  private readonly session = inject(Session);

  protected readonly fileAddress = this.api.fileAddress;
  private readonly fetched = rxResource({ stream: () => this.api.looks() });
  protected readonly problem = computed(() => (this.fetched.error() ? sentenceOf(this.fetched.error()) : ''));
  protected readonly isStudent = computed(() => this.session.courses().some(({ role }) => role === 'student'));
  protected readonly looks = computed(() =>
    (this.fetched.hasValue() ? this.fetched.value().items : []).slice(0, mostShown).map((look) => ({
      who: roleWords[look.by],
      what: `Set ${String(look.setNumber)}, ${look.setTitle}`,
      when: fullMomentOf(look.at, Intl.DateTimeFormat().resolvedOptions().timeZone),
    })),
  );
  protected readonly more = computed(() =>
    Math.max(0, (this.fetched.hasValue() ? this.fetched.value().total : 0) - mostShown),
  );
}
