import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { CaughtMailView } from '#shared/views/site-view.ts';
import { openTestRecord, siteIdOf, write, type TestRecord } from '../setup/test-record.ts';

const password = 'four plain words here';

describe('sign-in', () => {
  let record: TestRecord;
  beforeAll(async () => {
    record = await openTestRecord('empty_record', { withMail: true });
  });
  afterAll(() => record.close());

  const mailTo = (address: string) =>
    vi.waitFor(
      async () => {
        const rows = (await record.visitor().get('/api/v1/caught-mail')).body as CaughtMailView[];
        const found = rows.find((row) => row.to === address);
        expect(found, `mail to ${address}`).toBeDefined();
        return found!;
      },
      { timeout: 20_000, interval: 200 },
    );
  const secretOf = (mail: CaughtMailView) => /secret=([\w-]+)/.exec(mail.text)![1]!;

  it('an empty installation is founded once, with its administrator signed in', async () => {
    const founder = record.visitor();
    const body = {
      organisationName: 'Ashmoor Waste',
      displayName: 'Ada Founder',
      email: 'Ada@Ashmoor.example',
      password,
    };
    await founder
      .post('/api/v1/first-run')
      .send({ ...body, password: 'short' })
      .expect(422);
    await founder.post('/api/v1/first-run').send(body).expect(201);
    expect((await founder.get('/api/v1/me').expect(200)).body).toMatchObject({
      displayName: 'Ada Founder',
      email: 'ada@ashmoor.example',
      roles: ['admin'],
      sites: [],
    });
    const again = await record
      .visitor()
      .post('/api/v1/first-run')
      .send({ ...body, email: 'eve@else.example' });
    expect(again.status).toBeGreaterThanOrEqual(400);
  });

  it('the cookie is HttpOnly and same-site; a wrong password and an unknown address answer alike', async () => {
    const good = await record
      .visitor()
      .post('/api/v1/sign-in')
      .send({ email: 'ada@ashmoor.example', password })
      .expect(201);
    expect(good.headers['set-cookie']![0]).toMatch(/HttpOnly/i);
    expect(good.headers['set-cookie']![0]).toMatch(/SameSite=(Lax|Strict)/i);
    const wrong = await record
      .visitor()
      .post('/api/v1/sign-in')
      .send({ email: 'ada@ashmoor.example', password: 'not this one at all' });
    const unknown = await record
      .visitor()
      .post('/api/v1/sign-in')
      .send({ email: 'nobody@ashmoor.example', password });
    expect([wrong.status, wrong.body.detail]).toEqual([unknown.status, unknown.body.detail]);
    expect(wrong.status).toBe(401);
  });

  it('an invitation arrives by mail, works once, and the role is the one given', async () => {
    const admin = record.visitor();
    await admin.post('/api/v1/sign-in').send({ email: 'ada@ashmoor.example', password }).expect(201);
    const made = await write(admin, '/sites', {
      id: crypto.randomUUID(),
      name: 'Ashmoor',
      latitudeDeg: '52.4',
      elevationM: '90',
      timeZone: 'Europe/London',
      dayBoundary: '08:00',
      openedOn: '2026-01-01',
      displayUnits: 'metric',
    }).expect(201);
    const siteId = made.body.id as string;
    await write(admin, `/sites/${siteId}/people`, {
      id: crypto.randomUUID(),
      email: 'otto@ashmoor.example',
      displayName: 'Otto',
      role: 'operator',
    }).expect(201);
    const mail = await mailTo('otto@ashmoor.example');
    const otto = record.visitor();
    await otto
      .post('/api/v1/passwords')
      .send({ secret: secretOf(mail), password: 'otto has a password' })
      .expect(201);
    expect((await otto.get('/api/v1/me')).body.sites).toMatchObject([
      { name: 'Ashmoor', roles: ['operator'] },
    ]);
    await record
      .visitor()
      .post('/api/v1/passwords')
      .send({ secret: secretOf(mail), password: 'somebody else again' })
      .expect(410);
  });

  it('a role that is ended signs its person out at once', async () => {
    const admin = record.visitor();
    await admin.post('/api/v1/sign-in').send({ email: 'ada@ashmoor.example', password }).expect(201);
    const otto = record.visitor();
    await otto
      .post('/api/v1/sign-in')
      .send({ email: 'otto@ashmoor.example', password: 'otto has a password' })
      .expect(201);
    const siteId = await siteIdOf(otto);
    const people = (await admin.get(`/api/v1/sites/${siteId}/people`)).body as {
      people: { email: string; membershipId: string }[];
    };
    await write(
      admin,
      `/sites/${siteId}/people/${people.people.find((one) => one.email === 'otto@ashmoor.example')!.membershipId}/end`,
      {},
    ).expect(201);
    expect((await otto.get(`/api/v1/sites/${siteId}`)).status).toBeGreaterThanOrEqual(401);
  });

  it('a new password ends older sessions; an unknown address gets the same answer', async () => {
    const old = record.visitor();
    await old.post('/api/v1/sign-in').send({ email: 'ada@ashmoor.example', password }).expect(201);
    const known = await record
      .visitor()
      .post('/api/v1/password-resets')
      .send({ email: 'ada@ashmoor.example' })
      .expect(202);
    const unknown = await record
      .visitor()
      .post('/api/v1/password-resets')
      .send({ email: 'ghost@ashmoor.example' })
      .expect(202);
    expect(known.body).toEqual(unknown.body);
    await record
      .visitor()
      .post('/api/v1/passwords')
      .send({ secret: secretOf(await mailTo('ada@ashmoor.example')), password: 'a fresh set of words' })
      .expect(201);
    await old.get('/api/v1/me').expect(401);
  });

  it('signing out ends the session on the server, not only the cookie', async () => {
    const agent = record.visitor();
    const entered = await agent
      .post('/api/v1/sign-in')
      .send({ email: 'ada@ashmoor.example', password: 'a fresh set of words' })
      .expect(201);
    const cookie = entered.headers['set-cookie']![0]!.split(';')[0]!;
    await agent.post('/api/v1/sign-out').expect(204);
    await record.visitor().get('/api/v1/me').set('Cookie', cookie).expect(401);
  });

  it('a write sent by another site’s page is refused', async () => {
    const agent = record.visitor();
    const refused = await agent
      .post('/api/v1/sign-in')
      .set('Origin', 'https://elsewhere.example')
      .send({ email: 'ada@ashmoor.example', password: 'a fresh set of words' });
    expect([refused.status, refused.body.type]).toEqual([403, '/problems/request-from-elsewhere']);
    await agent
      .post('/api/v1/sign-in')
      .set('Sec-Fetch-Site', 'cross-site')
      .send({ email: 'x', password: 'x' })
      .expect(403);
  });

  it('too many tries for one address are slowed down', async () => {
    const statuses: number[] = [];
    for (let index = 0; index < 22; index += 1)
      statuses.push(
        (
          await record
            .visitor()
            .post('/api/v1/sign-in')
            .send({ email: 'guess@ashmoor.example', password: `guess number ${index}` })
        ).status,
      );
    expect(statuses.slice(0, 20).every((status) => status === 401)).toBe(true);
    expect(statuses.at(-1)).toBe(429);
  }, 120_000);
});
