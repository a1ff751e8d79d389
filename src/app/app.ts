import { ChangeDetectionStrategy, Component, inject } from '@angular/core';
import { RouterOutlet } from '@angular/router';
import { ColourScheme } from './core/colour-scheme';

/** The root: whatever page the address names. */
@Component({
  selector: 'app-root',
  imports: [RouterOutlet],
  template: '<router-outlet />',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class App {
  // Made at once, so that no page flashes in the other scheme.
  protected readonly scheme = inject(ColourScheme);
}
