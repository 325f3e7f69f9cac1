import { A11yModule } from '@angular/cdk/a11y';
import {
  ChangeDetectionStrategy,
  Component,
  computed,
  type ElementRef,
  inject,
  signal,
  viewChild,
} from '@angular/core';
import { toSignal } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatMenuModule } from '@angular/material/menu';
import {
  NavigationEnd,
  Router,
  RouterLink,
  RouterLinkActive,
  RouterOutlet,
  type ActivatedRouteSnapshot,
} from '@angular/router';
import { filter, map, startWith, tap } from 'rxjs';
import { EventStream } from '../core/event-stream';
import { RELOAD } from '../core/reload';
import { SessionStore } from '../core/session';
import { ThemeChoice, THEMES, type Theme } from '../core/theme-choice';
import { Icon } from '../shared/icon/icon';
import { Mark } from '../shared/mark/mark';
import { PLACES } from './navigation';

const THEME_WORDS: Readonly<Record<Theme, { readonly label: string; readonly icon: string }>> = {
  system: { label: 'As the system', icon: 'desktop_windows' },
  light: { label: 'Light', icon: 'light_mode' },
  dark: { label: 'Dark', icon: 'dark_mode' },
};

function deepest(route: ActivatedRouteSnapshot): ActivatedRouteSnapshot {
  return route.firstChild === null ? route : deepest(route.firstChild);
}

/** The frame around every page for those signed in. */
@Component({
  selector: 'ly-shell',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [
    A11yModule,
    Icon,
    Mark,
    MatButtonModule,
    MatMenuModule,
    RouterLink,
    RouterLinkActive,
    RouterOutlet,
  ],
  templateUrl: './shell.html',
  styleUrl: './shell.scss',
  host: { '(document:keydown.escape)': 'drawerOpen.set(false)', '(window:storage)': 'otherTab($event)' },
})
export class Shell {
  private readonly sessions = inject(SessionStore);
  private readonly router = inject(Router);
  private readonly events = inject(EventStream);
  private readonly themeChoice = inject(ThemeChoice);
  private readonly reload = inject(RELOAD);
  private readonly main = viewChild.required<ElementRef<HTMLElement>>('main');

  protected readonly person = this.sessions.person;
  protected readonly places = computed(() =>
    PLACES.map((group) => group.filter((place) => this.sessions.may(place.permission))).filter(
      (group) => group.length > 0,
    ),
  );
  protected readonly drawerOpen = signal(false);
  protected readonly themes = THEMES.map((theme) => ({ theme, ...THEME_WORDS[theme] }));
  protected readonly theme = this.themeChoice.theme;
  protected readonly themeIcon = computed(() => THEME_WORDS[this.theme()].icon);
  /** Whether the page at hand shows prices: its route says so. */
  protected readonly showsPrices = toSignal(
    this.router.events.pipe(
      filter((event) => event instanceof NavigationEnd),
      tap(() => this.drawerOpen.set(false)),
      startWith(null),
      map(() => deepest(this.router.routerState.snapshot.root).data['prices'] === true),
    ),
    { initialValue: false },
  );

  protected skip(event: Event): void {
    event.preventDefault();
    this.main().nativeElement.focus();
  }

  protected otherTab(event: StorageEvent): void {
    // What stands here was read as one person and must not go on as another.
    if (this.sessions.isSomebodyElse(event)) this.reload();
  }

  protected choose(theme: Theme): void {
    this.themeChoice.choose(theme);
  }

  protected async signOut(): Promise<void> {
    this.events.stop();
    await this.sessions.signOut();
    await this.router.navigateByUrl('/sign-in');
  }
}
