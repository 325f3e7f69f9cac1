import type { MailStore, WaitingMail } from '../../../api/domain/mail/store';
import { capturedSender } from '../../mail/captured';
import { sendMail } from './send-mail';

function storeOf(mail: Omit<WaitingMail<'order code'>, 'attempts'>): MailStore & { state: string; attempts: number } {
  const store = {
    state: 'waiting',
    attempts: 0,
    beginAttempt: () => {
      if (store.state !== 'waiting') return Promise.resolve(null);
      store.attempts += 1;
      return Promise.resolve({ ...mail, attempts: store.attempts });
    },
    markSent: () => Promise.resolve(void (store.state = 'sent')),
    markTrouble: (_id: string, _error: string, final: boolean) => Promise.resolve(void (store.state = final ? 'failed' : 'waiting')),
    overdue: () => Promise.resolve([]),
  };
  return store;
}

const mail = {
  id: 'm1',
  kind: 'order code' as const,
  model: { reference: 'LY-1', codeId: '5a0ec1f6-2222-4000-8000-000000000002', minutesValid: 10 },
  subject: 'Your code',
  messageId: '<m1@leanyear.invalid>',
  reader: { name: 'Ada', email: 'ada@broker.example' },
};

describe('sending a mail', () => {
  it('sends a waiting mail once, however often it is woken', async () => {
    const sender = capturedSender();
    const mails = storeOf(mail);
    const deps = { mails, sender, publicUrl: 'https://desk.example', linkSecret: 's' };
    await sendMail(deps, 'm1');
    await sendMail(deps, 'm1');
    expect(sender.mails.map((sent) => sent.messageId)).toEqual(['<m1@leanyear.invalid>']);
    expect(mails.state).toBe('sent');
  });

  it('asks the queue to try again, and gives up with the last attempt', async () => {
    const mails = storeOf(mail);
    const sender = { send: () => Promise.reject(new Error('connection refused')), close: () => undefined };
    const deps = { mails, sender, publicUrl: 'https://desk.example', linkSecret: 's' };
    for (let attempt = 1; attempt <= 5; attempt += 1) await expect(sendMail(deps, 'm1')).rejects.toThrow('connection refused');
    await sendMail(deps, 'm1');
    expect(mails.state).toBe('failed');
  });
});
