import type { InuringCover, LayerForm, LayerTerms } from '../model/layer';
import { countedLoss, inuringRecovery, reachOf } from './counting';
import { reinstatementShare, yearlyPayoff, type AnnualTerms } from './payoff';

const DAYS = 365;

/** A plain excess of loss, whose occurrences need nothing of one another. */
export interface PlainExcess {
  readonly limit: number;
  readonly attachment: number;
  readonly quotaShareKept: number;
}

/**
 * One layer through one year, occurrence by occurrence in order of day: what every price is made of, and what explains it.
 * `begin`, then `take` each occurrence, then read `payoff` (Z) and `reinstatement` (ρ).
 */
export class LayerYear {
  readonly form: LayerForm;
  /** Ground-up losses below it cannot count and need not be taken. */
  readonly reach: number;
  readonly annual: AnnualTerms;
  private readonly limit: number;
  private readonly attachment: number;
  private readonly quotaShareKept: number;
  private readonly covers: readonly InuringCover[];
  private readonly coversPaid: Float64Array;
  private readonly proRataTime: boolean;
  /** Terms of a layer in which an occurrence counts for itself alone; null for any other. */
  readonly plain: PlainExcess | null;
  /** Loss of the last occurrence after quota share and inuring covers. */
  net = 0;
  /** What occurrences counted for before annual terms, summed. */
  summed = 0;
  private qualified = 0;
  private paid = 0;
  private timedShare = 0;

  constructor(terms: LayerTerms) {
    this.form = terms.form ?? { kind: 'excess' };
    this.limit = terms.limit;
    this.attachment = terms.attachment;
    this.quotaShareKept = terms.quotaShareKept ?? 1;
    this.covers = terms.inuringCovers ?? [];
    this.coversPaid = new Float64Array(this.covers.length);
    this.proRataTime = terms.reinstatedProRataTime === true;
    const plain = this.form.kind === 'excess' && this.covers.length === 0 && !this.proRataTime;
    this.plain = plain ? { limit: terms.limit, attachment: terms.attachment, quotaShareKept: this.quotaShareKept } : null;
    this.reach = reachOf(this.form, terms.attachment, this.quotaShareKept, this.covers.length > 0);
    // An aggregate excess attaches to the year's sum as an annual deductible does.
    this.annual = this.form.kind === 'aggregate' ? { ...terms, annualDeductible: terms.annualDeductible + terms.attachment } : terms;
  }

  begin(): void {
    this.summed = 0;
    this.qualified = 0;
    this.paid = 0;
    this.timedShare = 0;
    this.coversPaid.fill(0);
  }

  /**
   * Takes an occurrence of the year.
   * @param loss ground-up, contract currency
   * @param day days since inception
   * @returns what it counts for before annual terms
   */
  take(loss: number, day: number): number {
    let net = loss * this.quotaShareKept;
    if (this.plain === null) net = this.afterCovers(net);
    this.net = net;
    const counted = countedLoss(net, this.form, this.limit, this.attachment, this.qualified);
    this.summed += counted;
    if (this.proRataTime) this.reinstate(day);
    return counted;
  }

  private afterCovers(loss: number): number {
    let net = loss;
    this.covers.forEach((cover, c) => {
      // Covers inure together: each sees the loss, none what another left of it.
      const recovered = inuringRecovery(loss, cover, this.coversPaid[c] ?? 0);
      this.coversPaid[c] = (this.coversPaid[c] ?? 0) + recovered;
      net -= recovered;
    });
    if (this.form.kind === 'nth event' && net >= this.form.qualifying) this.qualified += 1;
    return Math.max(net, 0);
  }

  private reinstate(day: number): void {
    const now = this.payoff;
    this.timedShare += ((reinstatementShare(now, this.annual) - reinstatementShare(this.paid, this.annual)) * (DAYS - day)) / DAYS;
    this.paid = now;
  }

  /** Z, the year's payoff so far for 100%. */
  get payoff(): number {
    return yearlyPayoff(this.summed, this.annual);
  }

  /** ρ, the year's reinstatement premium so far as a share of the layer premium. */
  get reinstatement(): number {
    return this.proRataTime ? this.timedShare : reinstatementShare(this.payoff, this.annual);
  }
}
