import { listBases, listBookVersions, listZones, readBook } from '../../contract/house';
import { serve, type ApiRouter } from '../../http/serve';
import type { HouseReader } from './port';

export function registerHouse(router: ApiRouter, deps: { readonly house: HouseReader }): void {
  serve(router, listBases, () => deps.house.bases());
  serve(router, readBook, () => deps.house.book());
  serve(router, listBookVersions, ({ query }) => deps.house.bookVersions(query));
  serve(router, listZones, () => deps.house.zones());
}
