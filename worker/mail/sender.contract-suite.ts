import type { MailSender, OutgoingMail } from './port';

/** What every way of sending mail must do; `arrived` answers the message ids that reached the other side. */
export function mailSenderContract(
  name: string,
  open: () => Promise<{ sender: MailSender; arrived(): Promise<string[]>; close(): Promise<void> }>,
): void {
  const mail = (over: Partial<OutgoingMail> = {}): OutgoingMail => ({
    to: 'reader@broker.example',
    subject: 'Firm quote LY-2027-0001',
    text: 'plain – with a dash',
    html: '<p>rich</p>',
    messageId: '<5a0ec1f6-0000-4000-8000-000000000001@leanyear.invalid>',
    ...over,
  });

  describe(`mail sender: ${name}`, () => {
    let post: Awaited<ReturnType<typeof open>>;
    beforeEach(async () => {
      post = await open();
    });
    afterEach(() => post.close());

    it('delivers under the message id it was given', async () => {
      await post.sender.send(mail());
      expect(await post.arrived()).toEqual([mail().messageId]);
    });

    it('repeats a mail under the same message id', async () => {
      await post.sender.send(mail());
      await post.sender.send(mail());
      expect(new Set(await post.arrived()).size).toBe(1);
      expect(await post.arrived()).toHaveLength(2);
    });

    it('rejects a mail without a recipient, and delivers nothing', async () => {
      await expect(post.sender.send(mail({ to: '' }))).rejects.toThrow(/recipient/i);
      expect(await post.arrived()).toEqual([]);
    });
  });
}
