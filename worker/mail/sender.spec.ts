import { simpleParser } from 'mailparser';
import { capturedSender } from './captured';
import { openPostOffice } from './post-office';
import { mailSenderContract } from './sender.contract-suite';
import { smtpSender } from './smtp';

mailSenderContract('captured', () => {
  const sender = capturedSender();
  return Promise.resolve({
    sender,
    arrived: () => Promise.resolve(sender.mails.map((mail) => mail.messageId)),
    close: () => Promise.resolve(sender.close()),
  });
});

mailSenderContract('SMTP', async () => {
  const raws: Buffer[] = [];
  const office = await openPostOffice(({ raw }) => {
    raws.push(raw);
    return Promise.resolve();
  });
  const sender = smtpSender(office.url, 'Leanyear <desk@leanyear.example>');
  return {
    sender,
    arrived: async () => Promise.all(raws.map(async (raw) => (await simpleParser(raw)).messageId ?? '')),
    async close() {
      sender.close();
      await office.close();
    },
  };
});

describe('the local post office', () => {
  it('refuses responsibility for a mail it could not keep', async () => {
    const office = await openPostOffice(() => Promise.reject(new Error('disk is full')));
    const sender = smtpSender(office.url, 'desk@leanyear.example');
    await expect(
      sender.send({ to: 'a@b.example', subject: 's', text: 't', html: 'h', messageId: '<1@leanyear.invalid>' }),
    ).rejects.toThrow(/disk is full/);
    sender.close();
    await office.close();
  });
});
