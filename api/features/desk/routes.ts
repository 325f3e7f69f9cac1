import { readDesk } from '../../contract/house';
import { serve, type ApiRouter } from '../../http/serve';
import type { DeskReader } from './port';

export function registerDesk(router: ApiRouter, deps: { readonly desk: DeskReader }): void {
  serve(router, readDesk, async ({ actor }) => {
    const [items, counts, missing] = await Promise.all([
      deps.desk.waitingFor(actor),
      deps.desk.counts(actor),
      deps.desk.missing(),
    ]);
    return { items, counts, missing };
  });
}
