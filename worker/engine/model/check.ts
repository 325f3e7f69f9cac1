import { exp } from '../math/exp';
import { ln } from '../math/ln';
import type { Catalogue, Grid, HouseBasis, LossTable } from './inputs';
import type { InuringCover, LayerForm, LayerTerms } from './layer';
import { demand } from './refusal';

/** Largest marginal utility that sums of squares over states can hold. */
const MOST_SLOPE = 1e100;

const finite = (value: number, least: number): boolean => value >= least && value < Infinity;
const share = (value: number): boolean => value >= 0 && value <= 1;

/** @throws EngineInputError outside the domain of a catalogue */
export function checkCatalogue(catalogue: Catalogue): void {
  const name = `Catalogue ${catalogue.lineage}`;
  const n = catalogue.eventNames.length;
  demand(n > 0, `The number of events of ${name}`, n, 'above 0');
  const columns = { rates: catalogue.ratePerYear, perils: catalogue.perilIndex, regions: catalogue.regionIndex, 'season days': catalogue.seasonDay, groups: catalogue.groupIndex };
  for (const [column, { length }] of Object.entries(columns)) demand(length === n, `The number of ${column} of ${name}`, length, `its number of events, ${n}`);
  for (const rate of catalogue.ratePerYear) demand(rate > 0 && rate < Infinity, `A rate of ${name}`, rate, 'above 0 and finite');
  if (catalogue.rateFactor !== undefined) {
    demand(catalogue.rateFactor.length === n, `The number of rate factors of ${name}`, catalogue.rateFactor.length, `its number of events, ${n}`);
    for (const factor of catalogue.rateFactor) demand(factor > 0 && factor < Infinity, `A rate factor of ${name}`, factor, 'above 0 and finite');
  }
  for (const day of catalogue.seasonDay) demand(day !== day || (day >= 1 && day <= 366), `A season day of ${name}`, day, 'from 1 to 366');
  const indices = [
    { of: 'peril', index: catalogue.perilIndex, least: 0, names: catalogue.perils.length },
    { of: 'region', index: catalogue.regionIndex, least: 0, names: catalogue.regions.length },
    { of: 'group', index: catalogue.groupIndex, least: -1, names: catalogue.groups.length },
  ];
  for (const { of, index, least, names } of indices) {
    for (const i of index) demand(i >= least && i < names, `The number of a ${of} of ${name}`, i, `from ${least} to ${names - 1}`);
  }
  for (const group of catalogue.groups) {
    demand(group.varianceToMean > 1 && group.varianceToMean < Infinity, `The ratio of variance to mean of group ${group.name}`, group.varianceToMean, 'above 1');
  }
}

/** @throws EngineInputError where the columns of a loss table are not of one length */
export function checkColumns({ lineage, eventIndex, meanLoss, sd, commonShare, exposedValue }: LossTable): void {
  const columns = { 'mean losses': meanLoss, deviations: sd, 'common shares': commonShare, 'exposed values': exposedValue };
  const rows = eventIndex.length;
  for (const [column, { length }] of Object.entries(columns)) demand(length === rows, `The number of ${column} of Loss table ${lineage}`, length, `its number of rows, ${rows}`);
}

function checkForm(key: string, form: LayerForm, layer: LayerTerms): void {
  if (form.kind === 'excess') return;
  if (form.kind === 'nth event') {
    demand(finite(form.first, 1) && Math.floor(form.first) === form.first, `Layer ${key}: the first event that counts`, form.first, 'a whole number from 1');
    demand(finite(form.qualifying, 0), `Layer ${key}: the qualifying threshold`, form.qualifying, '0 or more');
    return;
  }
  demand(finite(form.threshold, 0), `Layer ${key}: the threshold of an occurrence`, form.threshold, '0 or more');
  demand(form.cap === null || form.cap > form.threshold, `Layer ${key}: the cap of an occurrence`, form.cap ?? Infinity, `above its threshold, ${form.threshold}`);
  demand(layer.reinstatements.length === 0 && layer.unlimitedReinstatementsAt === undefined, `Layer ${key}: the number of reinstatements of an aggregate excess`, layer.reinstatements.length, '0');
}

function checkCover(key: string, cover: InuringCover): void {
  demand(finite(cover.limit, 0) && cover.limit > 0, `Layer ${key}: the limit of an inuring cover`, cover.limit, 'above 0');
  demand(finite(cover.attachment, 0), `Layer ${key}: the attachment of an inuring cover`, cover.attachment, '0 or more');
  demand(cover.annualLimit > 0, `Layer ${key}: the annual limit of an inuring cover`, cover.annualLimit, 'above 0');
}

/** @throws EngineInputError outside the domain of a layer's terms */
export function checkLayer(layer: LayerTerms): void {
  const { key } = layer;
  demand(finite(layer.limit, 0) && layer.limit > 0, `Layer ${key}: the limit`, layer.limit, 'above 0');
  demand(finite(layer.attachment, 0), `Layer ${key}: the attachment`, layer.attachment, '0 or more');
  demand(finite(layer.annualDeductible, 0), `Layer ${key}: the annual deductible`, layer.annualDeductible, '0 or more');
  for (const price of layer.reinstatements) demand(finite(price, 0), `Layer ${key}: the price of a reinstatement`, price, '0 or more');
  if (layer.unlimitedReinstatementsAt !== undefined) {
    demand(finite(layer.unlimitedReinstatementsAt, 0), `Layer ${key}: the price of unlimited reinstatements`, layer.unlimitedReinstatementsAt, '0 or more');
    demand(layer.reinstatements.length === 0, `Layer ${key}: the number of reinstatements beside unlimited ones`, layer.reinstatements.length, '0');
  }
  if (layer.annualLimit !== undefined) demand(layer.annualLimit > 0, `Layer ${key}: the annual limit`, layer.annualLimit, 'above 0');
  const kept = layer.quotaShareKept ?? 1;
  demand(kept > 0 && kept <= 1, `Layer ${key}: the share kept after the quota share`, kept, 'above 0 and 1 at most');
  const ceded = layer.coParticipation ?? 0;
  demand(ceded >= 0 && ceded < 1, `Layer ${key}: the co-participation`, ceded, '0 or more and below 1');
  // A line of exactly what is left must not be refused for the last bit of a difference.
  demand(layer.line > 0 && layer.line <= (1 - ceded) * (1 + 1e-12), `Layer ${key}: the line`, layer.line, `above 0 and ${1 - ceded} at most`);
  demand(layer.brokerage >= 0 && layer.brokerage < 1, `Layer ${key}: the brokerage`, layer.brokerage, '0 or more and below 1');
  checkForm(key, layer.form ?? { kind: 'excess' }, layer);
  layer.inuringCovers?.forEach((cover) => checkCover(key, cover));
}

/** @throws EngineInputError outside the domain of a house basis */
export function checkBasis(basis: HouseBasis): void {
  demand(basis.capital > 0 && basis.capital < Infinity, 'The capital of the house', basis.capital, 'above 0');
  demand(finite(basis.riskAversion, 0), 'Risk aversion', basis.riskAversion, '0 or more');
  demand(basis.floor > 0 && basis.floor <= 1, 'The floor', basis.floor, 'above 0 and 1 at most');
  // u′ at the floor, the most that any state's can be; its square is still to be multiplied by squared payoffs.
  const most = exp(-basis.riskAversion * ln(basis.floor));
  demand(most < MOST_SLOPE, 'The worth of money at the floor, floor^(−risk aversion),', most, `below ${MOST_SLOPE}`);
  const { discounting } = basis;
  if (discounting.mode === 'anchored') demand(discounting.risklessRate > -1 && discounting.risklessRate < Infinity, 'The riskless rate', discounting.risklessRate, 'above −1');
  else demand(discounting.discountFactor > 0 && discounting.discountFactor < Infinity, 'The discount factor', discounting.discountFactor, 'above 0');
  const back = basis.returnOnAssets ?? 0;
  demand(back > -1 && back < Infinity, 'The return on assets', back, 'above −1');
  demand(finite(basis.targetMargin, 0), 'The target margin', basis.targetMargin, '0 or more');
  demand(finite(basis.minimumRateOnLine, 0), 'The minimum rate on line', basis.minimumRateOnLine, '0 or more');
  demand(share(basis.taxes), 'Taxes', basis.taxes, 'from 0 to 1');
  demand(share(basis.variableExpense), 'Variable expense', basis.variableExpense, 'from 0 to 1');
  demand(finite(basis.lossAdjustment, 0), 'Loss adjustment expense', basis.lossAdjustment, '0 or more');
  demand(finite(basis.fixedExpensePerContract, 0), 'The fixed expense of a contract', basis.fixedExpensePerContract, '0 or more');
  demand(basis.attritionalAndOutward > -Infinity && basis.attritionalAndOutward < Infinity, 'Attritional loss and outward cost', basis.attritionalAndOutward, 'finite');
}

/** Brokerage, taxes and expenses must leave something of the premium. @throws EngineInputError */
export function checkDeductions(layer: LayerTerms, basis: HouseBasis): void {
  const taken = layer.brokerage + basis.taxes + basis.variableExpense;
  demand(taken < 1, `Layer ${layer.key}: brokerage, taxes and variable expense together`, taken, 'below 1');
}

/** @throws EngineInputError outside the domain of a grid */
export function checkGrid({ seed, states }: Grid): void {
  demand(/^[0-9a-f]{16}$/.test(seed), 'The seed', seed, 'sixteen hexadecimal digits');
  demand(Math.floor(states) === states && states >= 1000 && states <= 10_000_000, 'The number of states', states, 'a whole number from 1,000 to 10,000,000');
}
