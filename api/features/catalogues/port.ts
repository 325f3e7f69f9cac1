import type { Catalogue, CatalogueEvent, CatalogueVersion } from '../../contract/catalogues';

export interface CatalogueReader {
  list(): Promise<Catalogue[]>;
  byId(id: string): Promise<Catalogue | null>;
  version(versionId: string): Promise<CatalogueVersion | null>;
  /** In the file's order; `search` finds parts of an event's name, peril or region. */
  events(versionId: string, query: { offset: number; limit: number; search?: string | undefined }): Promise<{ items: CatalogueEvent[]; total: number }>;
}
