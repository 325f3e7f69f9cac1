import type { GrantRecord } from '../grant/grant';
import { amountInWords, amountOf, numberOf, timesShare, unitsOf, type Units } from '../money';
import type { QuoteRecord } from '../quote/quote';
import { Refused, type Reason } from '../shared/errors';
import type { AuthorityRule } from '../vocabulary';

/** A quoted layer with the figures that authority is measured by. */
export interface MeasuredLayer {
  readonly key: string;
  readonly name: string;
  readonly premium: Units;
  readonly writtenLine: number;
  /** Written line × occurrence limit, house currency. */
  readonly lineAmount: Units;
  readonly expectedLoss: number;
  readonly walkAwayPremium: number;
  readonly technicalPremium: number;
  /** Quoted ÷ technical premium. */
  readonly adequacy: number;
}

/** Puts premiums and the run's figures side by side, layer by layer. */
export function measuredLayers(quote: QuoteRecord): MeasuredLayer[] {
  return quote.terms.layers.map((layer) => {
    const premium = unitsOf(quote.premiums.find(({ key }) => key === layer.key)?.premium ?? '0');
    const figures = quote.run.layers.find(({ key }) => key === layer.key);
    const technicalPremium = figures?.technicalPremium ?? Number.NaN;
    return {
      key: layer.key,
      name: layer.name,
      premium,
      writtenLine: layer.writtenLine,
      lineAmount: timesShare(timesShare(unitsOf(layer.limit), layer.writtenLine), quote.run.exchangeRate),
      expectedLoss: figures?.expectedLoss ?? 0,
      walkAwayPremium: figures?.walkAwayPremium ?? Number.NaN,
      technicalPremium,
      adequacy: technicalPremium > 0 ? numberOf(premium) / technicalPremium : 0,
    };
  });
}

export interface RuleOutcome {
  readonly rule: AuthorityRule;
  readonly layer: string | null;
  readonly figure: string;
  readonly bound: string;
  readonly pass: boolean;
  readonly message: string;
}

const NO_GRANT = 'no authority granted';

const percent = (share: number): string => `${Number((share * 100).toFixed(4))}%`;

function outcome(rule: AuthorityRule, layer: MeasuredLayer, figure: string, bound: string | null, pass: boolean, what: string): RuleOutcome {
  const held = bound !== null;
  return {
    rule,
    layer: layer.name,
    figure,
    bound: bound ?? NO_GRANT,
    pass: held && pass,
    message: !held
      ? `${layer.name}: ${what} ${figure}, and no authority is granted.`
      : pass
        ? `${layer.name}: ${what} ${figure} is within ${bound}.`
        : `${layer.name}: ${what} ${figure} is outside ${bound}.`,
  };
}

function underGrant(layers: readonly MeasuredLayer[], grant: GrantRecord | null): RuleOutcome[] {
  return layers.flatMap((layer) => {
    const mostAmount = grant === null ? 0n : unitsOf(grant.largestLineAmount);
    // A figure that the run does not have is no authority either.
    const below = !(numberOf(layer.premium) >= layer.walkAwayPremium);
    return [
      outcome('largest line', layer, percent(layer.writtenLine), grant && `a line of ${percent(grant.largestLineShare)}`, layer.writtenLine <= (grant?.largestLineShare ?? -1), 'a written line of'),
      outcome('largest line', layer, amountInWords(layer.lineAmount), grant && `a line of ${amountInWords(mostAmount)}`, layer.lineAmount <= mostAmount, 'a line amount of'),
      outcome('lowest adequacy', layer, layer.adequacy.toFixed(3), grant && `an adequacy from ${grant.lowestAdequacy.toFixed(3)}`, layer.adequacy >= (grant?.lowestAdequacy ?? Infinity), 'an adequacy of'),
      outcome('below walk-away', layer, below ? 'below walk-away' : 'at or above walk-away', grant && (grant.belowWalkAway ? 'any premium' : 'premiums from walk-away up'), !below || grant?.belowWalkAway === true, 'a premium'),
    ];
  });
}

const failures = (outcomes: readonly RuleOutcome[]): number => outcomes.filter(({ pass }) => !pass).length;

/**
 * Every rule with its figure, its bound, pass or fail. Grants are whole: of several in force the one that is broken least
 * counts, never a mixture. Without a grant every rule fails: silence is never authority.
 * @param today a date, YYYY-MM-DD
 */
export function evaluateAuthority(layers: readonly MeasuredLayer[], grants: readonly GrantRecord[], today: string): RuleOutcome[] {
  const inForce = grants.filter((grant) => grant.endedAt === null && grant.startsOn <= today && today <= grant.endsOn);
  const candidates = inForce.length === 0 ? [underGrant(layers, null)] : inForce.map((grant) => underGrant(layers, grant));
  return candidates.reduce((best, next) => (failures(next) < failures(best) ? next : best));
}

export function failuresAsReasons(outcomes: readonly RuleOutcome[]): Reason[] {
  return outcomes.filter(({ pass }) => !pass).map(({ rule, message }) => ({ code: rule, message }));
}

/** Whether no grant at all stands behind these outcomes. */
export const holdsNone = (outcomes: readonly RuleOutcome[]): boolean => outcomes.every(({ bound }) => bound === NO_GRANT);

const issued = new WeakSet<Approval>();

/** Proof that a quote, in one version, is within somebody's authority. Only `enforceAuthority` makes one. */
export class Approval {
  constructor(
    readonly quoteId: string,
    readonly quoteVersion: number,
    readonly by: string,
  ) {}
}

/**
 * @returns an approval bound to the quote as it stands
 * @throws Refused with every rule that fails
 */
export function enforceAuthority(quote: QuoteRecord, outcomes: readonly RuleOutcome[], by: string): Approval {
  if (outcomes.length === 0 || outcomes.some(({ pass }) => !pass)) throw new Refused(failuresAsReasons(outcomes));
  const approval = new Approval(quote.id, quote.version, by);
  issued.add(approval);
  return approval;
}

/** @throws Error where the approval was not made by `enforceAuthority` for this quote as it stands: our own mistake */
export function demandApproval(approval: Approval, quote: { readonly id: string; readonly version: number }): void {
  if (!issued.has(approval) || approval.quoteId !== quote.id || approval.quoteVersion !== quote.version) {
    throw new Error('an approval was used for another quote than the one it was given for');
  }
}

export const lineAmountText = (layer: MeasuredLayer): string => amountOf(layer.lineAmount);
