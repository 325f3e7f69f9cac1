import { linkToken, orderCode } from '../../../api/domain/mail/secrets';
import type { MailModels } from '../../../api/domain/mail/mail';
import type { MailKind } from '../../../api/domain/vocabulary';
import type { Letter } from '../letter';
import { BROKER_CAUTIONS, HOUSE_SMALL, formatDate, layerTable, type TemplateContext } from './shared';

type Template<K extends MailKind> = (model: MailModels[K], context: TemplateContext) => Letter;

const quoteUrl = (context: TemplateContext, quoteId: string): string => `${context.publicUrl}/quotes/${quoteId}`;
const dear = (context: TemplateContext): string => `Dear ${context.readerName},`;

/** One template a kind of mail; a kind without one does not compile. */
const TEMPLATES: { readonly [K in MailKind]: Template<K> } = {
  'quote issued': (model, context) => ({
    heading: `${model.kind === 'firm' ? 'Firm quote' : 'Indication'} ${model.reference}, version ${model.number}`,
    greeting: dear(context),
    paragraphs: [
      `We are pleased to quote for ${model.cedant}, ${model.programmeName}.`,
      model.kind === 'firm'
        ? `This quote is firm and can be ordered until ${formatDate(model.validUntil)}, included.`
        : `This is an indication: it is not binding and holds no capacity. It stands until ${formatDate(model.validUntil)}.`,
    ],
    table: layerTable(model.layers, model.currency),
    action: { label: 'Read the quote and answer', url: `${context.publicUrl}/q/${linkToken(context.linkSecret, model.linkId)}` },
    after: [
      'The link opens this quote alone and can be opened again. An order through it asks for a code that we send to you.',
      `Questions go to ${model.underwriterName}, ${model.underwriterEmail}.`,
    ],
    small: BROKER_CAUTIONS,
  }),
  'quote bound': (model, context) => ({
    heading: `Bound: ${model.reference}, version ${model.number}`,
    greeting: dear(context),
    paragraphs: [
      `We confirm that we are bound for ${model.cedant}, ${model.programmeName}, from ${formatDate(model.inceptionOn)}, on these lines.`,
    ],
    table: layerTable(model.layers, model.currency),
    after: [`Please send the slip to ${model.underwriterName}, ${model.underwriterEmail}.`],
    small: BROKER_CAUTIONS,
  }),
  'order code': (model, context) => ({
    heading: `Code for your answer to ${model.reference}`,
    greeting: dear(context),
    paragraphs: [
      `Your code is ${orderCode(context.linkSecret, model.codeId)}.`,
      `It works once and for ${model.minutesValid} minutes. If you did not ask for it, you need do nothing.`,
    ],
    small: ['Nobody at our house will ever ask you for this code.'],
  }),
  'referral waiting': (model, context) => ({
    heading: `Referral waiting: ${model.reference}, version ${model.number}`,
    greeting: dear(context),
    paragraphs: [
      `${model.submittedBy} has referred the quote for ${model.cedant}, ${model.programmeName}. It is outside their authority:`,
      ...model.failures.map((failure) => `• ${failure}`),
    ],
    action: { label: 'Open the referral', url: quoteUrl(context, model.quoteId) },
    small: HOUSE_SMALL,
  }),
  'referral outcome': (model, context) => ({
    heading: `Referral ${model.outcome}: ${model.reference}, version ${model.number}`,
    greeting: dear(context),
    paragraphs: [
      `${model.decidedBy} has ${model.outcome} your referral.`,
      ...(model.note === '' ? [] : [`Their note: ${model.note}`]),
    ],
    action: { label: 'Open the quote', url: quoteUrl(context, model.quoteId) },
    small: HOUSE_SMALL,
  }),
  'broker answered': (model, context) => ({
    heading: `${model.answer === 'firm order' ? 'Firm order' : 'Not taken up'}: ${model.reference}, version ${model.number}`,
    greeting: dear(context),
    paragraphs: [
      model.answer === 'firm order' ? `${model.by} has given a firm order.` : `${model.by} has declined the quote.`,
      ...(model.note === '' ? [] : [`Their note: ${model.note}`]),
    ],
    action: { label: 'Open the quote', url: quoteUrl(context, model.quoteId) },
    small: HOUSE_SMALL,
  }),
};

export function letterFor<K extends MailKind>(kind: K, model: MailModels[K], context: TemplateContext): Letter {
  const template: Template<K> = TEMPLATES[kind];
  return template(model, context);
}
