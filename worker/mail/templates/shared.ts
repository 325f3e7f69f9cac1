import type { MailLayer } from '../../../api/domain/mail/mail';

/** What a template may draw on beside its model. */
export interface TemplateContext {
  readonly readerName: string;
  /** Address of the application as its readers reach it, without a closing slash. */
  readonly publicUrl: string;
  readonly linkSecret: string;
}

/** Whole units with thousands separated; places only where the amount has any. */
export function formatAmount(text: string): string {
  const [whole = '0', places = ''] = text.split('.');
  const grouped = whole.replace(/\B(?=(\d{3})+$)/g, ',');
  const kept = places.replace(/0+$/, '');
  return kept === '' ? grouped : `${grouped}.${kept.padEnd(2, '0')}`;
}

export function formatShare(share: number): string {
  return `${Number((share * 100).toFixed(4))}%`;
}

export function formatDate(isoDate: string): string {
  return new Intl.DateTimeFormat('en-GB', { day: 'numeric', month: 'long', year: 'numeric', timeZone: 'UTC' }).format(
    new Date(`${isoDate}T00:00:00Z`),
  );
}

export function layerTable(layers: readonly MailLayer[], currency: string): { head: string[]; rows: string[][] } {
  return {
    head: ['Layer', `Limit (${currency})`, `Attachment (${currency})`, `Premium for 100% (${currency})`, 'Our line'],
    rows: layers.map((layer) => [
      layer.name,
      formatAmount(layer.limit),
      formatAmount(layer.attachment),
      formatAmount(layer.premium),
      formatShare(layer.writtenLine),
    ]),
  };
}

export const BROKER_CAUTIONS: readonly string[] = [
  'Subject to local law, licence and sanctions rules, which come before anything in this mail.',
  'This is not an actuarial opinion.',
];
export const HOUSE_SMALL: readonly string[] = ['Sent by Leanyear because you are part of this quote.'];
