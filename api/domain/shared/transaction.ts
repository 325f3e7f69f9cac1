declare const transactionBrand: unique symbol;

/** A database transaction in progress, passed along to every port that takes part. Opaque outside `db`. */
export interface Transaction {
  readonly [transactionBrand]: true;
}

/** Runs work in one READ COMMITTED transaction: all of it is kept or, when it throws, none. */
export interface UnitOfWork {
  run<T>(work: (transaction: Transaction) => Promise<T>): Promise<T>;
}
