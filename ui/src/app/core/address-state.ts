import { inject, Injectable } from '@angular/core';
import { ActivatedRoute, Router } from '@angular/router';

/** Keeps how a view is set in the query of the address, so that it can be sent, marked and reloaded. */
@Injectable({ providedIn: 'root' })
export class AddressState {
  private readonly router = inject(Router);
  readonly query = inject(ActivatedRoute).queryParamMap;

  /** Sets some of the query and leaves the rest; null takes one away. The page stays where it is scrolled. */
  async set(changes: Readonly<Record<string, string | null>>): Promise<void> {
    await this.router.navigate([], {
      queryParams: changes,
      queryParamsHandling: 'merge',
      replaceUrl: true,
      scroll: 'manual',
    });
  }
}
