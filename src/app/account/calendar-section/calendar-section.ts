import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { firstValueFrom } from 'rxjs';
import { CalendarApi } from '../../core/api/calendar-api';
import { sentenceOf } from '../../core/api/request-failure';

/** The secret address of one's calendar: made, shown once, revoked. */
@Component({
  selector: 'app-calendar-section',
  imports: [MatButtonModule],
  template: `
    <h2>Calendar</h2>
    <p class="quiet">
      An address at which your calendar finds your own dates: when your sets open and close, with what was granted to
      you. Whoever knows the address can read them.
    </p>
    @if (made(); as address) {
      <p>This is shown once. Subscribe to it in your calendar:</p>
      <p class="address mono">{{ address }}</p>
    }
    <p class="failure" role="alert">{{ failure() }}</p>
    <p role="status">{{ done() }}</p>
    @if (fetched.hasValue()) {
      <div class="deeds">
        <button type="button" matButton="outlined" [disabled]="busy()" (click)="make()">
          {{ isThere() ? 'Make a new address' : 'Make an address' }}
        </button>
        @if (isThere()) {
          <button type="button" matButton [disabled]="busy()" (click)="revoke()">Revoke the address</button>
        }
      </div>
      @if (isThere() && !made()) {
        <p class="caption quiet">There is an address. A new one ends it.</p>
      }
    }
  `,
  styles: `
    :host {
      display: grid;
      gap: 12px;
    }

    .address {
      padding: 8px 12px;
      background: var(--field);
      border: var(--hair);
      overflow-wrap: anywhere;
      user-select: all;
    }

    .deeds {
      display: flex;
      flex-wrap: wrap;
      gap: 8px;
    }

    .failure {
      color: var(--wrong);
    }

    p:empty {
      display: none;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class CalendarSection {
  private readonly api = inject(CalendarApi);

  protected readonly fetched = rxResource({ stream: () => this.api.address() });
  protected readonly isThere = computed(() => this.fetched.hasValue() && this.fetched.value().madeAt !== null);
  protected readonly made = signal('');
  protected readonly done = signal('');
  protected readonly failure = signal('');
  protected readonly busy = signal(false);

  protected make(): Promise<void> {
    return this.act(async () => {
      const { address, madeAt } = await firstValueFrom(this.api.make());
      this.made.set(address);
      this.fetched.set({ madeAt });
    });
  }

  protected revoke(): Promise<void> {
    return this.act(async () => {
      await firstValueFrom(this.api.revoke());
      this.made.set('');
      this.fetched.set({ madeAt: null });
      this.done.set('The address is revoked. Calendars that use it find nothing any more.');
    });
  }

  private async act(deed: () => Promise<void>): Promise<void> {
    this.busy.set(true);
    this.failure.set('');
    this.done.set('');
    try {
      await deed();
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.busy.set(false);
    }
  }
}
