import { ChangeDetectionStrategy, Component, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import { MatMenuModule } from '@angular/material/menu';
import {
  type ActivatedRouteSnapshot,
  NavigationEnd,
  Router,
  RouterLink,
  RouterLinkActive,
  RouterOutlet,
} from '@angular/router';
import { filter } from 'rxjs';
import type { Role } from '@shared/primitives';
import { fullMomentOf } from '@shared/times';
import { BrandMark } from '../../ui/brand-mark/brand-mark';
import { Now } from '../now';
import { Session } from '../session';
import { SessionEnd } from '../session-end';

interface Place {
  readonly path: string;
  readonly name: string;
}

/** The pages of a course for each role, in the order of the bar. */
const places: Readonly<Record<Role, readonly Place[]>> = {
  lead: [
    { path: 'desk', name: 'Desk' },
    { path: 'problems', name: 'Problems' },
    { path: 'sets', name: 'Sets' },
    { path: 'marking', name: 'Marking' },
    { path: 'results', name: 'Results' },
    { path: 'people', name: 'People' },
    { path: 'record', name: 'Record' },
  ],
  marker: [
    { path: 'desk', name: 'Desk' },
    { path: 'marking', name: 'Marking' },
    { path: 'queries', name: 'Queries' },
  ],
  student: [
    { path: 'desk', name: 'Desk' },
    { path: 'sheets', name: 'Sheets' },
    { path: 'feedback', name: 'Feedback' },
  ],
};

/** The bar over every page: course, places, person. Light runs along its edge as far as the present page. */
@Component({
  selector: 'app-shell',
  imports: [BrandMark, MatButtonModule, MatIconModule, MatMenuModule, RouterLink, RouterLinkActive, RouterOutlet],
  templateUrl: './shell.html',
  styleUrl: './shell.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class Shell {
  private readonly router = inject(Router);
  private readonly clock = inject(Now);
  protected readonly session = inject(Session);
  protected readonly sessionEnd = inject(SessionEnd);
  private readonly section = signal('');

  protected readonly places = computed(() => {
    const role = this.session.role();
    return role ? places[role] : [];
  });
  /** How far the light reaches: the index of the present place. */
  protected readonly lit = computed(() => this.places().findIndex((place) => place.path === this.section()));
  protected readonly moment = computed(() => {
    const course = this.session.course();
    return course ? fullMomentOf(this.clock.now(), course.timeZone) : '';
  });
  protected readonly here = computed(() => this.places()[this.lit()]?.name ?? 'Menu');

  constructor() {
    this.look();
    this.router.events
      .pipe(
        filter((event) => event instanceof NavigationEnd),
        takeUntilDestroyed(),
      )
      .subscribe(() => {
        this.look();
      });
  }

  protected async signOut(): Promise<void> {
    await this.session.signOut();
    await this.router.navigateByUrl('/sign-in');
  }

  protected signInAgain(): void {
    void this.router.navigate(['/sign-in'], { queryParams: { then: this.router.url } });
  }

  private look(): void {
    let route: ActivatedRouteSnapshot | null = this.router.routerState.snapshot.root;
    let courseId: string | null = null;
    while (route) {
      courseId = route.paramMap.get('courseId') ?? courseId;
      route = route.firstChild;
    }
    this.session.enter(courseId);
    this.section.set(this.router.url.split(/[?#]/)[0]?.split('/')[3] ?? '');
  }
}
