import { timesShare, unitsOf, type Units } from '../money';
import type { FrozenLayer } from '../quote/quote';
import type { Transaction } from '../shared/transaction';

export interface ZoneArea {
  readonly id: string;
  readonly name: string;
  readonly perils: readonly string[];
  readonly regions: readonly string[];
}

export interface Footprint {
  readonly peril: string;
  readonly region: string;
}

/** A zone is touched where the losses behind the layers can come from one of its perils in one of its regions. */
export function zonesTouched(zones: readonly ZoneArea[], footprint: readonly Footprint[]): ZoneArea[] {
  return zones.filter((zone) => footprint.some(({ peril, region }) => zone.perils.includes(peril) && zone.regions.includes(region)));
}

/** Σ line × occurrence limit, house currency: what the layers take of every zone that they touch. */
export function capacityNeeded(layers: readonly FrozenLayer[], lineOf: (layer: FrozenLayer) => number, exchangeRate: number): Units {
  return layers.reduce((sum, layer) => sum + timesShare(timesShare(unitsOf(layer.limit), lineOf(layer)), exchangeRate), 0n);
}

/** Who takes capacity: a firm quote holds it, a contract uses it. */
export type Taker = { readonly quoteId: string } | { readonly contractId: string };

export interface Zones {
  /** Zones that these loss tables' perils and regions touch. */
  touchedBy(transaction: Transaction, lossTableIds: readonly string[]): Promise<ZoneArea[]>;
  /**
   * Takes an amount in each zone. The zones' rows are locked in the order of their ids, so that two people at once
   * neither oversell a zone nor wait for each other for ever.
   * @throws Refused with the reason "capacity" for every zone that has too little left; nothing is taken then
   */
  take(transaction: Transaction, zones: readonly ZoneArea[], amount: Units, taker: Taker): Promise<void>;
  /** Turns what a quote holds into what its contract uses, which may be less and is never more. */
  convert(transaction: Transaction, quoteId: string, contractId: string, amount: Units): Promise<void>;
  /** Gives back what a quote holds. */
  release(transaction: Transaction, quoteId: string): Promise<void>;
}
