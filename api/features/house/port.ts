import type { Basis, Book, Zone } from '../../contract/house';

export interface BookVersionView {
  readonly number: number;
  readonly cause: string;
  readonly at: string;
  readonly contractId: string | null;
}

export interface HouseReader {
  bases(): Promise<Basis[]>;
  book(): Promise<Book>;
  bookVersions(page: { offset: number; limit: number }): Promise<{ items: BookVersionView[]; total: number }>;
  zones(): Promise<Zone[]>;
}
