import type { GrantRecord } from '../grant/grant';
import { unitsOf } from '../money';
import { Refused } from '../shared/errors';
import type { QuoteRecord } from '../quote/quote';
import { Approval, demandApproval, enforceAuthority, evaluateAuthority, measuredLayers, type MeasuredLayer } from './authority';

const TODAY = '2027-03-01';
const grant = (over: Partial<GrantRecord> = {}): GrantRecord => ({
  id: 'g',
  personId: 'p',
  largestLineAmount: '1000000',
  largestLineShare: 0.1,
  lowestAdequacy: 1,
  belowWalkAway: false,
  startsOn: '2027-01-01',
  endsOn: '2027-12-31',
  grantedBy: null,
  endedAt: null,
  ...over,
});
const layer = (over: Partial<MeasuredLayer> = {}): MeasuredLayer => ({
  key: 'a',
  name: 'First',
  premium: unitsOf('1100000'),
  writtenLine: 0.1,
  lineAmount: unitsOf('1000000'),
  expectedLoss: 500_000,
  walkAwayPremium: 950_000,
  technicalPremium: 1_100_000,
  adequacy: 1,
  ...over,
});
const failed = (layers: MeasuredLayer[], grants: GrantRecord[], today = TODAY): string[] =>
  evaluateAuthority(layers, grants, today).flatMap(({ pass, rule, layer: of }) => (pass ? [] : [`${of ?? ''}: ${rule}`]));

describe('authority', () => {
  it('holds up to its very bounds, and lists every rule for every layer', () => {
    const outcomes = evaluateAuthority([layer(), layer({ key: 'b', name: 'Second' })], [grant()], TODAY);
    expect(outcomes.every(({ pass }) => pass)).toBe(true);
    expect(outcomes.map(({ rule }) => rule)).toEqual([
      'largest line', 'largest line', 'lowest adequacy', 'below walk-away',
      'largest line', 'largest line', 'lowest adequacy', 'below walk-away',
    ]);
  });

  it.each<[string, Partial<MeasuredLayer>, string[]]>([
    ['a share above the grant', { writtenLine: 0.1001 }, ['First: largest line']],
    ['a ten-thousandth above the amount', { lineAmount: unitsOf('1000000.0001') }, ['First: largest line']],
    ['too little adequacy', { adequacy: 0.9999 }, ['First: lowest adequacy']],
    ['a premium below walk-away', { walkAwayPremium: 1_100_001 }, ['First: below walk-away']],
    ['a run without figures', { walkAwayPremium: Number.NaN, adequacy: 0 }, ['First: lowest adequacy', 'First: below walk-away']],
  ])('ends at %s', (_name, over, rules) => expect(failed([layer(over)], [grant()])).toEqual(rules));

  it('below walk-away is an authority of its own', () => {
    const low = [layer({ walkAwayPremium: 2_000_000 })];
    expect(failed(low, [grant({ lowestAdequacy: 0 })])).toEqual(['First: below walk-away']);
    expect(failed(low, [grant({ belowWalkAway: true })])).toEqual([]);
  });

  it.each<[string, GrantRecord[]]>([
    ['no grant', []],
    ['a grant that starts tomorrow', [grant({ startsOn: '2027-03-02' })]],
    ['a grant that ended yesterday', [grant({ endsOn: '2027-02-28' })]],
    ['a grant that was taken back', [grant({ endedAt: '2027-02-01T00:00:00Z' })]],
  ])('%s is no authority: every rule fails', (_name, grants) => expect(failed([layer()], grants)).toHaveLength(4));

  it('holds on its first and its last day', () => {
    expect(failed([layer()], [grant()], '2027-01-01')).toEqual([]);
    expect(failed([layer()], [grant()], '2027-12-31')).toEqual([]);
  });

  it('takes one grant whole, never the best of two', () => {
    const wide = grant({ lowestAdequacy: 2 });
    const lenient = grant({ largestLineShare: 0.01, largestLineAmount: '1' });
    expect(failed([layer()], [lenient, wide])).toEqual(['First: lowest adequacy']);
  });
});

describe('an approval', () => {
  const quote = { id: 'q', version: 3 } as QuoteRecord;
  const good = evaluateAuthority([layer()], [grant()], TODAY);

  it('is given for a quote in one version only', () => {
    const approval = enforceAuthority(quote, good, 'p');
    expect(() => demandApproval(approval, quote)).not.toThrow();
    expect(() => demandApproval(approval, { id: 'q', version: 4 })).toThrow('another quote');
    expect(() => demandApproval(approval, { id: 'r', version: 3 })).toThrow('another quote');
  });

  it('cannot be made by hand', () => expect(() => demandApproval(new Approval('q', 3, 'p'), quote)).toThrow('another quote'));

  it('is refused with every failure at once, and where nothing was looked at', () => {
    const bad = evaluateAuthority([layer({ adequacy: 0, writtenLine: 1 })], [grant()], TODAY);
    let refused: unknown;
    try {
      enforceAuthority(quote, bad, 'p');
    } catch (error) {
      refused = error;
    }
    expect(refused).toBeInstanceOf(Refused);
    expect((refused as Refused).reasons.map(({ code }) => code)).toEqual(['largest line', 'lowest adequacy']);
    expect(() => enforceAuthority(quote, [], 'p')).toThrow(Refused);
  });
});

describe('a layer measured', () => {
  it('takes its line in house currency, and has no adequacy where the run has no figures', () => {
    const quote = {
      terms: { layers: [{ key: 'a', name: 'First', limit: '10000000', writtenLine: 0.075 }] },
      premiums: [{ key: 'a', premium: '900000' }],
      run: { layers: [], exchangeRate: 0.9 },
    } as unknown as QuoteRecord;
    expect(measuredLayers(quote)).toMatchObject([{ lineAmount: unitsOf('675000'), adequacy: 0, walkAwayPremium: Number.NaN }]);
  });
});
