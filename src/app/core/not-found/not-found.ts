import { ChangeDetectionStrategy, Component } from '@angular/core';
import { RouterLink } from '@angular/router';

/** For an address that names nothing. */
@Component({
  selector: 'app-not-found',
  imports: [RouterLink],
  template: `
    <main class="page">
      <h1>Nothing is here</h1>
      <p>This address names no page. It may have been mistyped, or what it named is not yours to see.</p>
      <p><a routerLink="/">Go to your desk</a></p>
    </main>
  `,
  styles: `
    .page {
      display: grid;
      gap: 12px;
      padding: 64px 48px;
    }
  `,
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class NotFound {}
