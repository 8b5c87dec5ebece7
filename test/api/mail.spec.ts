import { apiPaths, type ReceivedMail, type ReceivedMailSummary } from '@foreveil/shared';
import { inTransaction } from '../../server/src/database/transaction.js';
import type { Notice } from '../../server/src/modules/mail/facts.js';
import { MailSink } from '../../server/src/modules/mail/received/mail-sink.service.js';
import { markHanded, takeDue } from '../../server/src/modules/mail/outbox.js';
import { queueMail } from '../../server/src/modules/mail/queue-mail.js';
import { sendDueMail } from '../../server/src/modules/mail/send-due-mail.js';
import { startApi, type Api } from '../support/api/api.js';
import { startMailServer, type Answer, type MailServer } from '../support/api/mail-server.js';
import { makePerson, makeTeam, type Person, type Team } from '../support/api/person.js';
import { startWorker, until } from '../support/api/worker.js';

let api: Api;
let server: MailServer;
let events = 0;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());
beforeEach(async () => {
  await api.db('mail_outbox').delete();
});
afterEach(() => server?.close());

const NOTICE: Notice = {
  programmeName: 'Dunlin cloud',
  about: 'Ca II in Tern 1',
  sentence: 'Mirka asks you to look.',
  path: '/programmes/1',
};

const tell = (userId: string, changes: Partial<Notice> = {}, more: { dedupeKey?: string; programmeId?: string } = {}) =>
  inTransaction(api.db, (trx) =>
    queueMail(trx, { kind: 'review_request', userId, facts: { ...NOTICE, ...changes }, dedupeKey: `event ${++events}`, ...more }),
  );

/** Sends what is due to a server on `port`; waits between attempts are short. */
const send = (port = server.port) =>
  sendDueMail(api.db, { ...api.config, smtp: { host: '127.0.0.1', port, secure: false, auth: null }, mailRetrySeconds: 0.05 });
const statuses = () => api.db('mail_outbox').orderBy('created_at').pluck('status');
const serve = async (answer?: (n: number) => Answer) => (server = await startMailServer(0, answer));

describe('the outbox', () => {
  test('holds a message when and only when its event happened, and once, however often it is told', async () => {
    const { userId } = await makePerson(api);
    await expect(
      inTransaction(api.db, async (trx) => {
        await queueMail(trx, { kind: 'mention', userId, facts: NOTICE, dedupeKey: 'undone' });
        throw new Error('the event did not happen');
      }),
    ).rejects.toThrow('did not happen');
    expect(await statuses()).toEqual([]);
    await tell(userId, {}, { dedupeKey: 'one event' });
    await tell(userId, {}, { dedupeKey: 'one event' });
    expect(await statuses()).toEqual(['waiting']);
    await serve();
    await send();
    await tell(userId, {}, { dedupeKey: 'one event' });
    await send();
    expect(server.received).toHaveLength(1);
  });

  test('asks what the person chose: at once, once a day, never', async () => {
    const [now, daily, never] = [await makePerson(api), await makePerson(api), await makePerson(api)];
    await api.db('mail_choices').insert([
      { user_id: daily.userId, kind: 'review_request', choice: 'daily' },
      { user_id: never.userId, kind: 'review_request', choice: 'never' },
    ]);
    for (const { userId } of [now, daily, never]) await tell(userId);
    await tell(daily.userId, { about: 'Na I in Tern 2', sentence: 'Oskar asks you too.' });
    await serve();
    await send();
    expect(server.received.map(({ to }) => to)).toEqual([[now.email]]);
    const due = await api.db('mail_outbox').where({ digest: true }).pluck<Date[]>('due_at');
    expect(due).toHaveLength(2);
    expect(new Set(due.map((at) => at.toISOString().slice(11)))).toEqual(new Set(['07:00:00.000Z']));
    expect(due.every((at) => at.getTime() > Date.now() && at.getTime() - Date.now() <= 24 * 3_600_000)).toBe(true);
    await api.db('mail_outbox').update({ due_at: api.db.fn.now() }); // the morning comes
    await send();
    expect(server.received).toHaveLength(2);
    const { email, to } = server.received[1]!;
    expect(to).toEqual([daily.email]);
    expect(email.subject).toBe('2 things in Dunlin cloud');
    expect(email.text).toContain('Mirka asks you to look.');
    expect(email.text).toContain('Oskar asks you too.');
    expect(await api.db('mail_outbox').where({ digest: true }).pluck('status')).toEqual(['sent', 'sent']);
  });

  test('tells nothing to a closed account, and nothing of a programme to who is not in it any more', async () => {
    const team: Team = await makeTeam(api);
    const { programmeId, reader, analyst, reviewer } = team;
    for (const { userId } of [reader, analyst, reviewer]) await tell(userId, {}, { programmeId });
    await api.db('memberships').where({ programme_id: programmeId, user_id: reader.userId }).delete();
    await api.db('users').where({ id: analyst.userId }).update({ active: false });
    await tell(analyst.userId);
    await serve();
    await send();
    expect(server.received.map(({ to }) => to[0])).toEqual([reviewer.email]);
    expect((await statuses()).sort()).toEqual(['dropped', 'dropped', 'sent']);
  });
});

describe('a message', () => {
  test('is text and HTML, says where it comes from, and can be turned off', async () => {
    const person = await makePerson(api);
    await tell(person.userId, { remark: 'Is it blended?' });
    await serve();
    await send();
    const { email } = server.received[0]!;
    expect(email).toMatchObject({ subject: 'Ca II in Tern 1 (Dunlin cloud)', from: { name: 'Foreveil', address: 'foreveil@localhost' } });
    expect(email.text).toContain('Mirka asks you to look.');
    expect(email.text).toContain('> Is it blended?');
    expect(email.text).toContain(`${api.config.linkOrigin}/programmes/1`);
    expect(email.html).toContain('<blockquote');
    const headers = new Map(email.headers.map(({ key, value }) => [key, value]));
    expect(headers.get('auto-submitted')).toBe('auto-generated');
    expect(headers.get('list-unsubscribe')).toContain('/mail-choice#');
  });

  test('cannot be given another header, another recipient or another page by what people type', async () => {
    const person = await makePerson(api);
    const evil = 'x\r\nBcc: victim@example.net\r\n\r\n<script>alert(1)</script>\u202e\u0000';
    await tell(person.userId, { programmeName: evil, about: evil, sentence: evil, remark: evil });
    await serve();
    await send();
    const { to, raw, email } = server.received[0]!;
    expect(to).toEqual([person.email]);
    const head = raw.split('\r\n\r\n')[0]!;
    expect(head).not.toMatch(/^(bcc|cc):/im);
    expect(email.bcc ?? []).toEqual([]);
    expect(email.subject).toBe('x Bcc: victim@example.net <script>alert(1)</script> (x Bcc: victim@example.net <script>alert(1)</script>)');
    expect(email.html).not.toContain('<script');
    expect(email.html).toContain('&lt;script&gt;');
    expect(raw).not.toMatch(/[\u0000\u202e]/); // eslint-disable-line no-control-regex
  });

  test.each(['a@b\r\nBcc: c@example.net', 'two words@example.org', 'no-at-sign', '@example.org'])(
    'has no recipient like %j',
    async (address) => {
      const facts = { linkId: '0', expiresAt: new Date().toISOString() };
      await expect(
        inTransaction(api.db, (trx) => queueMail(trx, { kind: 'password_reset', address, facts, dedupeKey: address })),
      ).rejects.toThrow(/mail_outbox_address/);
    },
  );

  test('keeps its id over all attempts', async () => {
    const { userId } = await makePerson(api);
    await tell(userId);
    await serve((n) => (n < 2 ? 'later' : 'take'));
    await until(async () => (await send()).sent, 20_000);
    expect(server.received).toHaveLength(3);
    expect(new Set(server.received.map(({ email }) => email.messageId)).size).toBe(1);
  });
});

describe('when the mail server', () => {
  test('is away for a while, every message arrives once after', async () => {
    const people = await Promise.all(Array.from({ length: 5 }, () => makePerson(api)));
    await serve();
    const { port } = server;
    await server.close();
    for (let round = 0; round < 4; round++) for (const { userId } of people) await tell(userId, { about: `Line ${round}` });
    const away = await send(port);
    expect(away).toMatchObject({ sent: 0, unconfirmed: 0, refused: 0 });
    expect(away.not_sent).toBeGreaterThanOrEqual(20);
    server = await startMailServer(port);
    // two senders at once, until nothing is left
    await until(
      async () => {
        await Promise.all([send(), send()]);
        return (await statuses()).every((status) => status === 'sent');
      },
      30_000,
      () => JSON.stringify(server.received.length),
    );
    expect(server.received).toHaveLength(20);
    expect(new Set(server.received.map(({ to, email }) => `${to[0]} ${email.subject}`)).size).toBe(20);
  });

  test('refuses a message for good, it is not tried again, and others still go', async () => {
    const [one, two] = [await makePerson(api), await makePerson(api)];
    await tell(one.userId);
    await tell(two.userId);
    await serve((n) => (n === 0 ? 'refuse' : 'take'));
    expect(await send()).toEqual({ sent: 1, refused: 1, not_sent: 0, unconfirmed: 0 });
    expect((await statuses()).sort()).toEqual(['failed', 'sent']);
    expect(await api.db('mail_outbox').where({ status: 'failed' }).first('last_error')).toMatchObject({
      last_error: expect.stringContaining('550') as string,
    });
    expect(await send()).toMatchObject({ sent: 0, refused: 0 });
  });

  test('takes a message and hangs up without an answer, it is not sent a second time', async () => {
    const { userId } = await makePerson(api);
    await tell(userId);
    await serve(() => 'take and hang up');
    expect(await send()).toMatchObject({ unconfirmed: 1 });
    expect(await statuses()).toEqual(['unconfirmed']);
    await send();
    expect(server.received).toHaveLength(1);
  });

  test('is not named at all, mail waits', async () => {
    const { userId } = await makePerson(api);
    await tell(userId);
    expect(await sendDueMail(api.db, { ...api.config, smtp: null })).toMatchObject({ sent: 0 });
    expect(await statuses()).toEqual(['waiting']);
  });
});

describe('a sender that dies', () => {
  const timeIsUp = () => api.db('mail_outbox').update({ claimed_until: api.db.raw(`now() - interval '1 second'`) });

  test('before it handed the message over leaves it to another, and cannot send it itself any more', async () => {
    const { userId } = await makePerson(api);
    await tell(userId);
    const parcel = (await takeDue(api.db))!;
    expect(await takeDue(api.db)).toBeNull();
    await timeIsUp();
    await serve();
    expect(await send()).toMatchObject({ sent: 1 });
    expect(await markHanded(api.db, parcel)).toBe(false);
  });

  test('after it handed the message over leaves it unconfirmed', async () => {
    const { userId } = await makePerson(api);
    await tell(userId);
    await markHanded(api.db, (await takeDue(api.db))!);
    await timeIsUp();
    await serve();
    expect(await send()).toMatchObject({ sent: 0 });
    expect(await statuses()).toEqual(['unconfirmed']);
  });
});

test('the worker sends what the API queued, also after the mail server was away', async () => {
  const people: Person[] = await Promise.all(Array.from({ length: 4 }, () => makePerson(api)));
  await serve();
  const { port } = server;
  await server.close();
  const worker = await startWorker(api, { SMTP_URL: `smtp://127.0.0.1:${port}`, MAIL_RETRY_SECONDS: '0.3' });
  try {
    for (const { userId } of people) await tell(userId);
    await until(async () => (await api.db('mail_outbox').where('attempts', '>', 0).pluck('id')).length === 4, 30_000);
    server = await startMailServer(port);
    await until(async () => (await statuses()).every((status) => status === 'sent'), 60_000);
    expect(server.received.map(({ to }) => to[0]).sort()).toEqual(people.map(({ email }) => email).sort());
  } finally {
    expect(await worker.end()).toBe(0);
  }
});

test('the mail server of a demonstration keeps what it receives and shows it', async () => {
  const demo = await startApi({ mailSinkPort: 0 });
  try {
    const { userId, email } = await makePerson(demo);
    await inTransaction(demo.db, (trx) => queueMail(trx, { kind: 'mention', userId, facts: NOTICE, dedupeKey: 'shown' }));
    const smtp = { host: '127.0.0.1', port: demo.app.get(MailSink).port, secure: false, auth: null };
    expect(await sendDueMail(demo.db, { ...demo.config, smtp })).toMatchObject({ sent: 1 });
    const list = (await (await fetch(`${demo.url}${apiPaths.receivedMails}`)).json()) as ReceivedMailSummary[];
    expect(list).toEqual([
      {
        id: expect.any(String) as string,
        receivedAt: expect.any(String) as string,
        to: [email],
        subject: 'Ca II in Tern 1 (Dunlin cloud)',
      },
    ]);
    const mail = (await (await fetch(`${demo.url}${apiPaths.receivedMail(list[0]!.id)}`)).json()) as ReceivedMail;
    expect(mail.text).toContain('Mirka asks you to look.');
    expect(mail.html).toContain('Mirka asks you to look.');
    for (const id of ['0', '999999', 'x', '1e3']) expect((await fetch(`${demo.url}${apiPaths.receivedMail(id)}`)).status).toBe(404);
  } finally {
    await demo.close();
  }
});
