import { linkIdOf, linkToken, orderCode } from '../../../api/domain/mail/secrets';
import { letterAsHtml, letterAsText } from '../letter';
import { letterFor } from '.';
import { formatAmount } from './shared';

const context = { readerName: 'Ada <Broker>', publicUrl: 'https://desk.example', linkSecret: 'secret' };
const linkId = '5a0ec1f6-1111-4000-8000-000000000001';
const issued = letterFor(
  'quote issued',
  {
    reference: 'LY-2027-0003',
    number: 2,
    kind: 'firm',
    cedant: 'Cedant & Sons',
    programmeName: 'Wind excess of loss',
    currency: 'EUR',
    validUntil: '2026-12-18',
    underwriterName: 'Uma Writer',
    underwriterEmail: 'uma@house.example',
    layers: [{ name: 'First', limit: '12500000.0000', attachment: '5000000', premium: '1234567.5', writtenLine: 0.075 }],
    linkId,
  },
  context,
);

describe('mail templates', () => {
  it('show the same amounts, dates and link in plain text and in HTML', () => {
    const text = letterAsText(issued);
    const html = letterAsHtml(issued);
    for (const expected of ['12,500,000', '5,000,000', '1,234,567.50', '7.5%', '18 December 2026', 'LY-2027-0003']) {
      expect(text).toContain(expected);
      expect(html).toContain(expected);
    }
    expect(text).toContain(`https://desk.example/q/${linkToken('secret', linkId)}`);
  });

  it('escape what people typed', () => {
    const html = letterAsHtml(issued);
    expect(html).toContain('Dear Ada &lt;Broker&gt;,');
    expect(html).toContain('Cedant &amp; Sons');
    expect(html).not.toContain('<Broker>');
  });

  it('mail the very code that the order is checked against', () => {
    const codeId = '5a0ec1f6-2222-4000-8000-000000000002';
    const letter = letterFor('order code', { reference: 'LY-2027-0003', codeId, minutesValid: 10 }, context);
    expect(letterAsText(letter)).toContain(orderCode('secret', codeId));
    expect(orderCode('secret', codeId)).toMatch(/^\d{6}$/);
  });

  it.each([
    ['0', '0'],
    ['999', '999'],
    ['1000', '1,000'],
    ['125000000.0000', '125,000,000'],
    ['1234.5', '1,234.50'],
  ])('format %s as %s', (amount, expected) => expect(formatAmount(amount)).toBe(expected));
});

describe('signed links', () => {
  it('name their link only under the secret that signed them', () => {
    const token = linkToken('secret', linkId);
    expect(linkIdOf('secret', token)).toBe(linkId);
    expect(linkIdOf('another', token)).toBeNull();
    expect(linkIdOf('secret', `${linkId.replace('5a', '5b')}.${token.split('.')[1] ?? ''}`)).toBeNull();
    expect(linkIdOf('secret', 'nonsense')).toBeNull();
  });
});
