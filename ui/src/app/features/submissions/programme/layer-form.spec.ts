import type { LayerTerms } from '@leanyear/contract/programmes';
import { layerForm, nextLayer, overlaps, programmeForm, reinstatementsOf, termsOf } from './layer-form';

const layer = (over: Partial<LayerTerms> = {}): LayerTerms => ({
  key: 'layer-1',
  name: 'Layer 1',
  limit: '10000000',
  attachment: '5000000',
  annualDeductible: '0',
  reinstatements: [1, 0.5],
  brokerage: 0.1,
  writtenLine: 0.05,
  ...over,
});

describe('a layer of the terms sheet', () => {
  it('gives back the terms it was made of', () => expect(termsOf(layerForm(layer()))).toEqual(layer()));

  it.each([
    ['100 50', [1, 0.5]],
    ['100%, 50%', [1, 0.5]],
    ['', []],
    ['0', [0]],
    ['600', null],
    ['-1', null],
    ['a hundred', null],
    ['1 2 3 4 5 6', null],
  ])('reads reinstatements typed as "%s"', (text, prices) => expect(reinstatementsOf(text)).toEqual(prices));

  it('says at once what is wrong with a limit of 0, a line of 0 and a reinstatement that is none', () => {
    const form = layerForm(layer({ limit: '0', writtenLine: 0 }));
    form.controls.reinstatements.setValue('many');
    expect(form.controls.limit.errors).toEqual({ aboveZero: 'This must be above 0.' });
    expect(form.controls.writtenLine.errors).toEqual({ line: 'A written line is above 0%.' });
    expect(form.controls.reinstatements.invalid).toBe(true);
  });

  it('stacks the next layer on the last under a key of its own', () => {
    const next = nextLayer([layer({ key: 'layer-2' })]);
    expect(next).toMatchObject({ key: 'layer-3', attachment: '15000000', limit: '10000000' });
  });

  it('warns of layers that cover the same ground, and only of those', () => {
    const above = layer({ key: 'b', name: 'Above', attachment: '15000000' });
    expect(overlaps([layer(), above])).toEqual([]);
    expect(overlaps([above, layer({ limit: '10000001' })])).toEqual(['Above overlaps Layer 1.']);
  });

  it('holds a programme with its tables and layers', () => {
    const terms = { name: 'Wind', currency: 'EUR', inceptionOn: '2027-01-01', lossTableIds: ['t'], layers: [layer()] };
    const form = programmeForm(terms);
    expect(form.valid).toBe(true);
    expect(form.getRawValue()).toMatchObject({ name: 'Wind', lossTableIds: ['t'] });
    form.controls.currency.setValue('euro');
    expect(form.valid).toBe(false);
  });
});
