import { Readable } from 'node:stream';
import MailComposer from 'nodemailer/lib/mail-composer';
import SMTPConnection from 'nodemailer/lib/smtp-connection';
import type { Config, Smtp } from '../../config/config.js';
import type { Rendered } from './letters/render.js';

export interface Message extends Rendered {
  readonly to: string;
  /** the same at every attempt, so that a receiver may tell a repetition */
  readonly messageId: string;
  /** turns off this kind of mail at one press (RFC 8058) */
  readonly stop: string | null;
}

/** How a dialogue with the mail server ended. `unconfirmed`: the whole message left and no answer came, so it may have arrived. */
export type Posted = { readonly end: 'sent' } | { readonly end: 'refused' | 'not_sent' | 'unconfirmed'; readonly error: string };

/** Sends one message. `beforeHanding` runs when the server waits for its first byte; when it gives false, nothing is sent. */
export async function post(smtp: Smtp, from: Config['mailFrom'], message: Message, beforeHanding: () => Promise<boolean>): Promise<Posted> {
  const bytes = await compose(from, message);
  let handed = false;
  const body = Readable.from(
    (async function* () {
      if (!(await beforeHanding())) throw new Error('the message was taken from this sender');
      handed = true;
      yield bytes;
    })(),
  );
  try {
    await converse(smtp, { from: from.address, to: [message.to] }, body);
    return { end: 'sent' };
  } catch (error) {
    const { message: sentence, responseCode } = error as Error & { responseCode?: number };
    // an answer that refuses is certain, whenever it comes; silence is so only before the message left
    if (responseCode) return { end: responseCode >= 500 ? 'refused' : 'not_sent', error: sentence };
    return { end: handed ? 'unconfirmed' : 'not_sent', error: sentence };
  }
}

const compose = (from: Config['mailFrom'], { to, subject, text, html, messageId, stop }: Message): Promise<Buffer> =>
  new MailComposer({
    from,
    to: { name: '', address: to },
    subject,
    text,
    html,
    messageId,
    headers: { 'Auto-Submitted': 'auto-generated', ...(stop ? { 'List-Unsubscribe': `<${stop}>` } : {}) },
    disableFileAccess: true,
    disableUrlAccess: true,
  })
    .compile()
    .build();

/** Connects, signs in where there is a name, sends, and says goodbye. */
function converse({ auth, ...where }: Smtp, envelope: { from: string; to: string[] }, body: Readable): Promise<void> {
  const connection = new SMTPConnection({ ...where, connectionTimeout: 10_000, greetingTimeout: 10_000, socketTimeout: 30_000 });
  return new Promise<void>((resolve, reject) => {
    connection.once('error', reject);
    const send = (): void =>
      connection.send(envelope, body, (error) => {
        if (error) return reject(error);
        connection.quit();
        resolve();
      });
    connection.connect((error) => {
      if (error) return reject(error);
      if (!auth) return send();
      connection.login({ credentials: auth }, (refused) => (refused ? reject(refused) : send()));
    });
  }).finally(() => connection.close());
}
