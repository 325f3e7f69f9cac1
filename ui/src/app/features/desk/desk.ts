import { ChangeDetectionStrategy, Component, computed, inject } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { RouterLink } from '@angular/router';
import { readDesk, type DeskItem } from '@leanyear/contract/house';
import { Api } from '../../core/api';
import { EventStream } from '../../core/event-stream';
import { SessionStore } from '../../core/session';
import { AgoPipe, FigurePipe } from '../../shared/format/pipes';
import { Icon } from '../../shared/icon/icon';
import { StatePanel } from '../../shared/state-panel/state-panel';

const KINDS: Readonly<Record<DeskItem['kind'], { readonly title: string; readonly icon: string }>> = {
  order: { title: 'Firm orders to bind', icon: 'assignment' },
  referral: { title: 'Referrals to decide', icon: 'gavel' },
  returned: { title: 'Returned to you', icon: 'undo' },
  approved: { title: 'Approved, to be issued', icon: 'send' },
  expiring: { title: 'Validity ends soon', icon: 'timer' },
  draft: { title: 'Your drafts', icon: 'edit' },
  answered: { title: 'Not taken up lately', icon: 'thumb_down' },
  run: { title: 'Your runs', icon: 'progress_activity' },
  catalogue: { title: 'Catalogues to release', icon: 'library_books' },
  mail: { title: 'Mails that did not arrive', icon: 'mail' },
};

/** What waits for the reader, by kind and oldest first. */
@Component({
  selector: 'ly-desk',
  changeDetection: ChangeDetectionStrategy.OnPush,
  imports: [AgoPipe, FigurePipe, Icon, RouterLink, StatePanel],
  template: `
    <div class="page">
      <div class="page-head">
        <div>
          <p class="kicker">Desk</p>
          <h1>{{ greeting() }}</h1>
        </div>
      </div>
      @if (desk.hasValue()) {
        @for (words of desk.value().missing; track words) {
          <p class="fault" role="status">{{ words }}</p>
        }
        <dl class="counts">
          <div><dt>Open submissions</dt><dd class="figures">{{ desk.value().counts.openSubmissions | figure }}</dd></div>
          <div><dt>Quotes with brokers</dt><dd class="figures">{{ desk.value().counts.issuedQuotes | figure }}</dd></div>
          <div><dt>Bound this year</dt><dd class="figures">{{ desk.value().counts.boundThisYear | figure }}</dd></div>
        </dl>
        @if (groups().length === 0) {
          <ly-state-panel icon="check_circle" title="Nothing waits for you" detail="Drafts, referrals, orders and runs of yours appear here by themselves." />
        }
        @for (group of groups(); track group.kind) {
          <section class="sheet" [attr.aria-labelledby]="group.kind">
            <h2 [id]="group.kind"><ly-icon [name]="group.icon" /> {{ group.title }}</h2>
            <ul class="waiting">
              @for (item of group.items; track item.href) {
                <li>
                  <a [routerLink]="pathOf(item)" [queryParams]="queryOf(item)">{{ item.title }}</a>
                  <span>{{ item.detail }}</span>
                  <span class="soft">{{ item.since | ago }}</span>
                </li>
              }
            </ul>
          </section>
        }
      } @else {
        <ly-state-panel [of]="desk" (again)="desk.reload()" />
      }
    </div>
  `,
  styles: `
    .counts {
      display: flex;
      flex-wrap: wrap;
      gap: var(--ly-space-5) var(--ly-space-7);
      margin: 0;
    }

    .counts dt {
      color: var(--ly-ink-soft);
    }

    .counts dd {
      font-size: var(--ly-headline);
      margin: 0;
    }

    .waiting {
      display: grid;
      gap: var(--ly-space-2);
      list-style: none;
      margin: 0;
      padding: 0;
    }

    .waiting li {
      align-items: baseline;
      border-top: 1px solid var(--ly-rule);
      display: grid;
      gap: var(--ly-space-1) var(--ly-space-4);
      grid-template-columns: minmax(0, 16rem) minmax(0, 1fr) max-content;
      padding-top: var(--ly-space-2);
    }

    @media (max-width: 40rem) {
      .waiting li {
        grid-template-columns: minmax(0, 1fr);
      }
    }
  `,
})
export class Desk {
  private readonly session = inject(SessionStore);
  protected readonly desk = inject(Api).resource(readDesk, () => ({}));
  protected readonly greeting = computed(() => `What waits for ${this.session.person()?.name ?? 'you'}`);
  protected readonly groups = computed(() => {
    if (!this.desk.hasValue()) return [];
    const items = this.desk.value().items;
    return (Object.keys(KINDS) as DeskItem['kind'][]).flatMap((kind) => {
      const of = items.filter((item) => item.kind === kind);
      return of.length === 0 ? [] : [{ kind, ...KINDS[kind], items: of }];
    });
  });

  constructor() {
    inject(EventStream)
      .on('quote', 'run', 'catalogue', 'mail')
      .pipe(takeUntilDestroyed())
      .subscribe((told) => {
        // A run tells how far it is several times a second; only its ends change what waits.
        if (told.topic === 'run' && told.progress !== undefined) return;
        this.desk.reload();
      });
  }

  protected pathOf(item: DeskItem): string {
    return item.href.split('?')[0] ?? item.href;
  }

  protected queryOf(item: DeskItem): Record<string, string> {
    return Object.fromEntries(new URLSearchParams(item.href.split('?')[1] ?? ''));
  }
}
