import { once } from 'node:events';
import type { AddressInfo } from 'node:net';
import { SMTPServer } from 'smtp-server';
import { afterAll, afterEach, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { purgeExpired } from '../../../server/commands/purge-expired.js';
import { createMailer } from '../../../server/mail/mailer.js';
import { invitationMessage, passwordResetMessage } from '../../../server/mail/messages.js';
import { sendNextMail, startOutboxSender } from '../../../server/mail/outbox-sender.js';
import { queueMail } from '../../../server/mail/queue-mail.js';
import { OutboxMail } from '../../../server/models/outbox-mail.js';
import { createTestApp, type TestApp } from '../../support/test-app.js';

const MINUTE = 60_000;

let server: TestApp;
beforeAll(async () => {
  server = await createTestApp();
});
beforeEach(async () => {
  await OutboxMail.destroy({ where: {} });
  server.mails.length = 0;
});
afterEach(() => {
  vi.useRealTimers();
});
afterAll(async () => {
  await server.close();
});

const queue = async (subject = 'Subject', lifeMs = 60 * MINUTE) =>
  await server.context.sequelize.transaction((transaction) =>
    queueMail(transaction, { to: 'a@laboratory.test', subject, text: 'Body with a link' }, new Date(Date.now() + lifeMs)),
  );
const only = async () => await OutboxMail.findOne({ rejectOnEmpty: true });
const failing = { send: () => Promise.reject(new Error('mailbox is full')), close: () => undefined };

describe('the outbox', () => {
  it('keeps a mail only when the change it tells of is kept', async () => {
    const broken = server.context.sequelize.transaction(async (transaction) => {
      await queueMail(transaction, { to: 'a@laboratory.test', subject: 'Subject', text: 'Body' }, new Date());
      throw new Error('the change failed');
    });
    await expect(broken).rejects.toThrow('the change failed');
    expect(await OutboxMail.count()).toBe(0);
  });

  it('sends each mail once, oldest first, and forgets the link it held', async () => {
    await queue('First');
    await queue('Second');
    expect(await sendNextMail(server.context)).toBe(true);
    expect(await sendNextMail(server.context)).toBe(true);
    expect(await sendNextMail(server.context)).toBe(false);
    expect(server.mails.map(({ subject }) => subject)).toEqual(['First', 'Second']);
    expect(server.mails[0]).toEqual({ to: 'a@laboratory.test', subject: 'First', text: 'Body with a link' });
    for (const mail of await OutboxMail.findAll()) expect(mail).toMatchObject({ status: 'sent', body: '', attempts: 1 });
  });

  it('gives a mail to one of several senders', async () => {
    await queue();
    const sent = await Promise.all([sendNextMail(server.context), sendNextMail(server.context), sendNextMail(server.context)]);
    expect(sent.filter(Boolean)).toHaveLength(1);
    expect(server.mails).toHaveLength(1);
  });

  it('tries again later and later, and gives up in the end', async () => {
    await queue('Stubborn', 1_000 * MINUTE);
    const waits: number[] = [];
    let now = Date.now();
    for (;;) {
      vi.useFakeTimers({ toFake: ['Date'], now });
      await sendNextMail({ ...server.context, mailer: failing });
      const mail = await only();
      if (mail.status !== 'waiting') break;
      expect(await sendNextMail(server.context)).toBe(false);
      waits.push(Math.round((mail.nextAttemptAt.getTime() - now) / MINUTE));
      now = mail.nextAttemptAt.getTime();
    }
    expect(waits).toEqual([1, 5, 30, 120, 480]);
    expect(await only()).toMatchObject({ status: 'failed', attempts: 6, lastError: 'mailbox is full' });
    expect(server.mails).toEqual([]);
  });

  it('does not send what is no longer good, and forgets its link', async () => {
    await queue('Late', MINUTE);
    vi.useFakeTimers({ toFake: ['Date'], now: Date.now() + 2 * MINUTE });
    expect(await sendNextMail(server.context)).toBe(false);
    await purgeExpired(server.context, new Date());
    expect(await only()).toMatchObject({ status: 'expired', body: '' });
  });

  it('is left alone without a mail server', async () => {
    await queue();
    await startOutboxSender(server.context).stop();
    expect((await only()).status).toBe('waiting');
    await expect(
      createMailer({ smtpUrl: null, mailFrom: 'x@laboratory.test' }).send({ to: 'a@laboratory.test', subject: '', text: '' }),
    ).rejects.toThrow('SMTP_URL');
  });
});

describe('the mailer', () => {
  it('hands the outbox to a mail server', async () => {
    const received: string[] = [];
    const smtp = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS'],
      onData: (stream, session, done) => {
        let text = `to ${session.envelope.rcptTo.map(({ address }) => address).join()}\n`;
        stream.on('data', (chunk: Buffer) => (text += chunk.toString()));
        stream.on('end', () => (received.push(text), done()));
      },
    });
    const listener = smtp.listen(0, '127.0.0.1');
    await once(listener, 'listening');
    const config = {
      ...server.context.config,
      smtpUrl: `smtp://127.0.0.1:${(listener.address() as AddressInfo).port}?ignoreTLS=true`,
      mailFrom: 'Isoloom <loom@laboratory.test>',
    };
    const mailer = createMailer(config);
    await queue('Invitation');
    const sender = startOutboxSender({ ...server.context, config, mailer });
    while ((await only()).status === 'waiting') await new Promise((resolve) => setTimeout(resolve, 20));
    await sender.stop();
    mailer.close();
    await new Promise<void>((resolve) => smtp.close(() => resolve()));
    expect(received).toHaveLength(1);
    expect(received[0]).toContain('to a@laboratory.test');
    expect(received[0]).toContain('From: Isoloom <loom@laboratory.test>');
    expect(received[0]).toContain('Subject: Invitation');
    expect(received[0]).toContain('Body with a link');
    expect((await only()).status).toBe('sent');
  });
});

describe('messages', () => {
  const expiresAt = new Date('2031-03-04T05:06:07Z');

  it('name team, role, inviter, link and how long it works', () => {
    const { to, subject, text } = invitationMessage({
      email: 'a@laboratory.test',
      teamName: 'Dyes',
      role: 'lead',
      invitedBy: 'Lena',
      link: 'http://host/invitation/x',
      expiresAt,
    });
    expect(to).toBe('a@laboratory.test');
    expect(subject).toBe('Invitation to Dyes in Isoloom');
    for (const part of ['Lena invites you', 'team Dyes', 'as a lead', 'http://host/invitation/x', '2031-03-04 05:06 UTC'])
      expect(text).toContain(part);
    const reset = passwordResetMessage({ email: 'a@laboratory.test', link: 'http://host/reset/x', expiresAt });
    for (const part of ['http://host/reset/x', '2031-03-04 05:06 UTC', 'ignore this mail']) expect(reset.text).toContain(part);
  });

  it('do not let a name write headers or paragraphs', () => {
    const message = invitationMessage({
      email: 'a@laboratory.test',
      teamName: 'Dyes\r\nBcc: all@laboratory.test',
      role: 'reader',
      invitedBy: 'Lena\n\nPay here',
      link: 'l',
      expiresAt,
    });
    expect(message.subject).not.toMatch(/[\r\n]/);
    expect(message.text).toContain('Lena Pay here invites you');
  });
});
