const { abs } = Math;

/** Sums as in twice the digits (A. Neumaier 1974, ZAMM 54): what rounding loses of each term is kept and added at the end. */
export class CompensatedSum {
  private sum = 0;
  private lost = 0;

  add(term: number): void {
    const next = this.sum + term;
    this.lost += abs(this.sum) >= abs(term) ? this.sum - next + term : term - next + this.sum;
    this.sum = next;
  }

  get value(): number {
    return this.sum + this.lost;
  }
}

/** Σ term(i) over 0..n − 1. */
export function compensated(n: number, term: (i: number) => number): number {
  const sum = new CompensatedSum();
  for (let i = 0; i < n; i += 1) sum.add(term(i));
  return sum.value;
}
