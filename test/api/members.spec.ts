import {
  apiPaths,
  type Invitation,
  type InvitationLook,
  type MemberDetail,
  type Problem,
  type Programme,
  type StagedProgramme,
} from '@foreveil/shared';
import { randomUUID } from 'node:crypto';
import request, { type Response } from 'supertest';
import { purgeProgrammes } from '../../server/src/modules/programmes/purge-programmes.js';
import { analysisOf, complete, feature } from '../support/api/analyses.js';
import { startApi, type Api } from '../support/api/api.js';
import { mailTo, mailedSecret, toldTo } from '../support/api/outbox.js';
import { PASSWORD, makePerson, makeTeam, personWith, signIn, type Person, type Team } from '../support/api/person.js';
import { stored } from '../support/api/spectra.js';

let api: Api;
beforeAll(async () => {
  api = await startApi();
});
afterAll(() => api.close());

const anybody = (path: string, body: object) => request(api.url).post(path).set('X-Foreveil', '1').send(body);
const codeOf = ({ body }: Response) => (body as Problem).code;
const match = (version: number) => ({ 'If-Match': `"${version}"` });
const newAddress = () => `${randomUUID()}@example.org`;
const membersOf = async (person: Person, programmeId: string) =>
  (await person.get(apiPaths.members(programmeId)).expect(200)).body as MemberDetail[];
const changeRole = (by: Person, programmeId: string, of: Person, role: string, version = 1) =>
  by.patch(apiPaths.member(programmeId, of.userId), { role }, match(version));

async function invite(
  { lead, programmeId }: Team,
  email = newAddress(),
  role = 'analyst',
): Promise<{ email: string; secret: string; invitation: Invitation }> {
  const answer = await lead.post(apiPaths.invitations(programmeId), { email, role }).expect(201);
  return { email, secret: await mailedSecret(api, 'invitation', email), invitation: answer.body as Invitation };
}

async function secondLead(team: Team): Promise<Person> {
  const person = await makePerson(api, 'lead');
  await api.db('memberships').insert({ programme_id: team.programmeId, user_id: person.userId, role: 'lead' });
  return person;
}

describe('an invitation', () => {
  test('leads from the mail to an account and into the programme, once', async () => {
    const team = await makeTeam(api);
    const { email, secret } = await invite(team);
    const look = (await anybody(apiPaths.lookAtInvitation, { secret }).expect(200)).body as InvitationLook;
    expect(look).toMatchObject({ email, role: 'analyst', invitedBy: team.lead.name, hasAccount: false, programmeId: team.programmeId });
    await anybody(apiPaths.joinWithNewAccount, { secret, name: 'Runa Holm', password: 'short' }).expect(422);
    const joined = await anybody(apiPaths.joinWithNewAccount, { secret, name: 'Runa Holm', password: PASSWORD }).expect(204);
    const cookie = joined.get('Set-Cookie')![0]!.split(';')[0]!;
    const runa = personWith(api, { role: 'analyst', userId: '', email, name: 'Runa Holm', cookie });
    expect(((await runa.get(apiPaths.programme(team.programmeId)).expect(200)).body as Programme).role).toBe('analyst');
    await signIn(api, email); // the account is a whole one
    for (const path of [apiPaths.joinWithNewAccount, apiPaths.lookAtInvitation]) {
      const body = path === apiPaths.lookAtInvitation ? { secret } : { secret, name: 'Again', password: PASSWORD };
      expect(codeOf(await anybody(path, body).expect(410))).toBe('link_not_valid');
    }
    expect(await toldTo(api, team.lead.email)).toEqual(['membership']);
  });

  test('is accepted by who has an account already, whatever its address', async () => {
    const team = await makeTeam(api);
    const { secret } = await invite(team, team.outsider.email, 'reader');
    expect((await anybody(apiPaths.lookAtInvitation, { secret })).body).toMatchObject({ hasAccount: true });
    expect(codeOf(await anybody(apiPaths.joinWithNewAccount, { secret, name: 'Twice', password: PASSWORD }).expect(409))).toBe(
      'email_taken',
    );
    await team.outsider.post(apiPaths.acceptInvitation, { secret }).expect(200, { programmeId: team.programmeId });
    expect((await membersOf(team.lead, team.programmeId)).find(({ userId }) => userId === team.outsider.userId)).toMatchObject({
      role: 'reader',
    });
  });

  test('is used by only one of two who hold its link', async () => {
    const team = await makeTeam(api);
    const { secret } = await invite(team);
    const people = await Promise.all([makePerson(api), makePerson(api), makePerson(api)]);
    const answers = await Promise.all(people.map((person) => person.post(apiPaths.acceptInvitation, { secret })));
    expect(answers.map(({ status }) => status).sort()).toEqual([200, 410, 410]);
    expect(await membersOf(team.lead, team.programmeId)).toHaveLength(5);
  });

  test('stays good when a member uses it by mistake', async () => {
    const team = await makeTeam(api);
    const { secret } = await invite(team);
    expect(codeOf(await team.reader.post(apiPaths.acceptInvitation, { secret }).expect(409))).toBe('already_member');
    await team.outsider.post(apiPaths.acceptInvitation, { secret }).expect(200);
  });

  test('ends when it is taken back, sent anew, too old, when its sender may not invite any more, and with the programme', async () => {
    const team = await makeTeam(api);
    const { lead, programmeId } = team;
    const dead = async (secret: string) => expect((await anybody(apiPaths.lookAtInvitation, { secret })).status).toBe(410);

    const revoked = await invite(team);
    await lead.delete(apiPaths.invitation(programmeId, revoked.invitation.id)).expect(204);
    await lead.delete(apiPaths.invitation(programmeId, revoked.invitation.id)).expect(404);
    await dead(revoked.secret);

    const first = await invite(team);
    const second = await invite(team, first.email, 'reader');
    await dead(first.secret);
    expect((await anybody(apiPaths.lookAtInvitation, { secret: second.secret })).body).toMatchObject({ role: 'reader' });

    const old = await invite(team);
    await api
      .db('invitations')
      .where({ id: old.invitation.id })
      .update({ expires_at: api.db.raw(`now() - interval '1 second'`) });
    await dead(old.secret);
    expect(
      ((await lead.get(apiPaths.invitations(programmeId))).body as Invitation[]).find(({ id }) => id === old.invitation.id),
    ).toMatchObject({ expired: true });

    const colleague = await secondLead(team);
    const email = newAddress();
    await colleague.post(apiPaths.invitations(programmeId), { email, role: 'lead' }).expect(201);
    await changeRole(lead, programmeId, colleague, 'reader').expect(200);
    await dead(await mailedSecret(api, 'invitation', email));

    const orphan = await invite(team);
    await lead.delete(apiPaths.programme(programmeId), undefined, match(1)).expect(204);
    await dead(orphan.secret);
  });

  test.each(['nobody', 'a@b\r\nBcc: victim@example.net', 'one@example.org,two@example.org', '', 'Name <a@example.org>'])(
    'is not sent to %j',
    async (email) => {
      const { lead, programmeId } = await makeTeam(api);
      const before = await api.db('mail_outbox').count({ n: '*' }).first();
      await lead.post(apiPaths.invitations(programmeId), { email, role: 'reader' }).expect(400);
      expect(await api.db('mail_outbox').count({ n: '*' }).first()).toEqual(before);
    },
  );

  test('is not sent to a member, nor too many in an hour', async () => {
    const { lead, reader, programmeId } = await makeTeam(api);
    expect(codeOf(await lead.post(apiPaths.invitations(programmeId), { email: reader.email, role: 'lead' }).expect(409))).toBe(
      'already_member',
    );
    const rows = Array.from({ length: api.config.invitationsPerHour }, () => ({
      programme_id: programmeId,
      role: 'reader',
      invited_by: lead.userId,
      email: newAddress(),
      secret_hash: randomUUID(),
      expires_at: new Date(),
    }));
    await api.db('invitations').insert(rows);
    expect(codeOf(await lead.post(apiPaths.invitations(programmeId), { email: newAddress(), role: 'reader' }).expect(429))).toBe(
      'too_many_requests',
    );
  });
});

describe('members', () => {
  test('are seen by all of them, their addresses by leads only', async () => {
    const team = await makeTeam(api);
    const [forLead, forReader] = [await membersOf(team.lead, team.programmeId), await membersOf(team.reader, team.programmeId)];
    expect(forLead.map(({ email }) => email).sort()).toEqual(
      [team.reader, team.analyst, team.reviewer, team.lead].map(({ email }) => email).sort(),
    );
    expect(forReader.map(({ name, role, version }) => ({ name, role, version }))).toEqual(
      forLead.map(({ name, role, version }) => ({ name, role, version })),
    );
    expect(forReader.every(({ email }) => email === null)).toBe(true);
  });

  test('change role by a lead, which counts at once, is told and written down', async () => {
    const team = await makeTeam(api);
    const { lead, analyst, programmeId } = team;
    const answer = await changeRole(lead, programmeId, analyst, 'reader').expect(200);
    expect(answer.body).toMatchObject({ role: 'reader', version: 2 });
    expect(answer.headers['etag']).toBe('"2"');
    await analyst.post(apiPaths.targets(programmeId), { name: 'Late', kind: 'star' }).expect(403);
    expect((await mailTo(api, analyst.email)).at(-1)!.facts.sentence).toContain('made you reader');
    expect(await api.db('audit').where({ action: 'role_changed', subject: analyst.userId }).first('facts')).toEqual({
      facts: { from: 'analyst', to: 'reader' },
    });
  });

  test('are not changed by who saw an older state, without a version, or to a role that is none', async () => {
    const { lead, analyst, programmeId } = await makeTeam(api);
    await changeRole(lead, programmeId, analyst, 'reviewer').expect(200);
    const stale = await changeRole(lead, programmeId, analyst, 'lead').expect(412);
    expect((stale.body as Problem).current).toMatchObject({ role: 'reviewer', version: 2 });
    await lead.patch(apiPaths.member(programmeId, analyst.userId), { role: 'lead' }).expect(428);
    await changeRole(lead, programmeId, analyst, 'owner', 2).expect(400);
    await changeRole(lead, programmeId, await makePerson(api), 'reader').expect(404);
  });

  test('cannot lose their last lead, whoever asks', async () => {
    const team = await makeTeam(api);
    const { lead, programmeId } = team;
    expect(codeOf(await changeRole(lead, programmeId, lead, 'reader').expect(409))).toBe('last_lead');
    expect(codeOf(await lead.post(apiPaths.leaveProgramme(programmeId)).expect(409))).toBe('last_lead');
    expect(codeOf(await lead.delete(apiPaths.member(programmeId, lead.userId), undefined, match(1)).expect(409))).toBe('last_lead');
    const closed = await secondLead(team); // one who cannot sign in is none
    await api.db('users').where({ id: closed.userId }).update({ active: false });
    expect(codeOf(await lead.post(apiPaths.leaveProgramme(programmeId)).expect(409))).toBe('last_lead');
    await api.db('users').where({ id: closed.userId }).update({ active: true });
    await lead.post(apiPaths.leaveProgramme(programmeId)).expect(204);
    await lead.get(apiPaths.programme(programmeId)).expect(404);
  });

  test('keep a lead when two leads demote, remove or leave each other at the same moment', async () => {
    for (let round = 0; round < 12; round++) {
      const team = await makeTeam(api);
      const [ana, ben, id] = [team.lead, await secondLead(team), team.programmeId];
      const acts = [
        () => [changeRole(ana, id, ben, 'reader'), changeRole(ben, id, ana, 'reader')],
        () => [
          ana.delete(apiPaths.member(id, ben.userId), undefined, match(1)),
          ben.delete(apiPaths.member(id, ana.userId), undefined, match(1)),
        ],
        () => [ana.post(apiPaths.leaveProgramme(id)), ben.post(apiPaths.leaveProgramme(id))],
      ][round % 3]!;
      const answers = await Promise.all(acts());
      const done = answers.filter(({ status }) => status < 300);
      expect(answers.map(({ status }) => status)).toEqual(expect.arrayContaining([expect.any(Number)]));
      expect(done).toHaveLength(1);
      expect(answers.find(({ status }) => status >= 300)!.status).toBeGreaterThanOrEqual(403);
      expect(await api.db('memberships').where({ programme_id: id, role: 'lead' })).toHaveLength(1);
    }
  });

  test('who are removed leave their decisions under their name, lose everything else, and are told', async () => {
    const team = await makeTeam(api);
    const { lead, reviewer, programmeId } = team;
    const spectrum = await stored(api, team);
    await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
    const decided = await reviewer.post(
      apiPaths.decide(programmeId, spectrum.analysis!.id, 0),
      { action: 'propose', lineId: null, systemId: null },
      { 'If-Match': '"0"' },
    );
    expect(decided.status).toBe(200);
    await lead.delete(apiPaths.member(programmeId, reviewer.userId), undefined, match(1)).expect(204);
    await reviewer.get(apiPaths.programme(programmeId)).expect(404);
    await reviewer.get(apiPaths.events(programmeId)).expect(404);
    const kept = (await lead.get(apiPaths.identifications(programmeId, spectrum.id))).body as { decidedBy: string }[];
    expect(kept).toEqual([expect.objectContaining({ decidedBy: reviewer.name })]);
    expect((await mailTo(api, reviewer.email)).at(-1)!.facts.sentence).toContain('removed you');
  });

  test('hear of changes on their open pages, and who is removed is let go', async () => {
    const team = await makeTeam(api);
    const { lead, analyst, reader, programmeId } = team;
    const listen = async (person: Person) => {
      const answer = await fetch(`${api.url}${apiPaths.events(programmeId)}`, { headers: { Cookie: person.cookie } });
      return answer.body!.pipeThrough(new TextDecoderStream()).getReader();
    };
    const [analysts, readers] = [await listen(analyst), await listen(reader)];
    const until = async (stream: ReadableStreamDefaultReader<string>, word: string): Promise<boolean> => {
      for (;;) {
        const { done, value } = await stream.read();
        if (done) return false;
        if (value.includes(word)) return true;
      }
    };
    await changeRole(lead, programmeId, analyst, 'reviewer').expect(200);
    expect(await until(analysts, '"type":"programme"')).toBe(true);
    await lead.delete(apiPaths.member(programmeId, reader.userId), undefined, match(1)).expect(204);
    while (!(await readers.read()).done); // the stream ends
    await analysts.cancel();
  });
});

describe('a programme', () => {
  test('is renamed by a lead who saw its present state', async () => {
    const { lead, programmeId } = await makeTeam(api);
    const seen = await lead.get(apiPaths.programme(programmeId)).expect(200);
    expect(seen.headers['etag']).toBe('"1"');
    const answer = await lead.patch(apiPaths.programme(programmeId), { name: 'Heron survey' }, match(1)).expect(200);
    expect(answer.body).toMatchObject({ name: 'Heron survey', version: 2 });
    const stale = await lead.patch(apiPaths.programme(programmeId), { description: 'lost' }, match(1)).expect(412);
    expect((stale.body as Problem).current).toMatchObject({ name: 'Heron survey' });
    await lead.patch(apiPaths.programme(programmeId), { name: 'x' }).expect(428);
    await lead.patch(apiPaths.programme(programmeId), { name: '   ' }, match(2)).expect(400);
    await lead.patch(apiPaths.programme(programmeId), { deletedAt: null, version: 9 }, match(2)).expect(400);
  });

  test('that is deleted is out of sight of everybody, and leads can have it back as it was', async () => {
    const team = await makeTeam(api);
    const { lead, reader, programmeId } = team;
    await stored(api, team);
    await secondLead(team);
    await lead.delete(apiPaths.programme(programmeId), undefined, match(7)).expect(412);
    await lead.delete(apiPaths.programme(programmeId), undefined, match(1)).expect(204);
    for (const person of [lead, reader]) {
      await person.get(apiPaths.programme(programmeId)).expect(404);
      await person.get(apiPaths.targets(programmeId)).expect(404);
      expect((await person.get(apiPaths.programmes)).body).toEqual([]);
    }
    expect((await reader.get(apiPaths.stagedProgrammes)).body).toEqual([]);
    const [staged] = (await lead.get(apiPaths.stagedProgrammes)).body as StagedProgramme[];
    expect(staged).toMatchObject({ id: programmeId, deletedBy: lead.name });
    expect((Date.parse(staged!.goneAt) - Date.parse(staged!.deletedAt)) / 86_400_000).toBe(30);
    await reader.post(apiPaths.recoverProgramme(programmeId)).expect(403);
    await team.outsider.post(apiPaths.recoverProgramme(programmeId)).expect(404);
    expect((await lead.post(apiPaths.recoverProgramme(programmeId)).expect(200)).body).toMatchObject({ id: programmeId, spectra: 1 });
    await reader.get(apiPaths.programme(programmeId)).expect(200);
  });

  test('goes for good after 30 days with everything in it, not before, and only the trail stays', async () => {
    const [gone, kept] = [await makeTeam(api), await makeTeam(api)];
    for (const team of [gone, kept]) {
      const spectrum = await stored(api, team);
      await complete(api, spectrum.analysis!.id, analysisOf([feature(0, 500.5)]));
      const body = { action: 'propose', lineId: null, systemId: null };
      await team.reviewer.post(apiPaths.decide(team.programmeId, spectrum.analysis!.id, 0), body, { 'If-Match': '"0"' }).expect(200);
      await invite(team);
      await team.lead.delete(apiPaths.programme(team.programmeId), undefined, match(1)).expect(204);
    }
    const deletedDaysAgo = (team: Team, days: number) =>
      api
        .db('programmes')
        .where({ id: team.programmeId })
        .update({ deleted_at: api.db.raw(`now() - ? * interval '1 day'`, [days]) });
    await deletedDaysAgo(gone, 30.01);
    await deletedDaysAgo(kept, 29.9);
    expect(await purgeProgrammes(api.db)).toBe(1);
    expect(await purgeProgrammes(api.db)).toBe(0);
    const left = async ({ programmeId }: Team) => {
      const { rows } = await api.db.raw<{ rows: { table_name: string }[] }>(
        `select table_name from information_schema.columns where table_schema = 'public' and column_name = 'programme_id' and table_name <> 'audit'`,
      );
      expect(rows.length).toBeGreaterThan(5);
      const counts = await Promise.all(
        rows.map(async ({ table_name: table }) => [table, (await api.db(table).where({ programme_id: programmeId })).length] as const),
      );
      return counts.filter(([, count]) => count > 0).map(([table]) => table);
    };
    expect(await left(gone)).toEqual([]);
    expect(await left(kept)).toEqual(expect.arrayContaining(['memberships', 'identifications', 'spectra', 'invitations']));
    expect((await api.db('audit').where({ programme_id: gone.programmeId }).orderBy('id').pluck('action')).at(-1)).toBe('programme_purged');
    await expect(api.db('identification_events').delete()).rejects.toThrow(/only grows/); // the gate is shut again
    await kept.lead.post(apiPaths.recoverProgramme(kept.programmeId)).expect(200);
  });
});
