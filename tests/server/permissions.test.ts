import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { hashPassword } from '#server/features/access/access-service.ts';
import { allRoutes } from '#server/routes.ts';
import { isAllowed, permissionTable, roles, type Role } from '#shared/permissions.ts';
import { openTestRecord, siteIdOf, type Agent, type TestRecord } from '../setup/test-record.ts';

const nothing = '00000000-0000-4000-8000-000000000000';

/** Address of a route at a site, with placeholders that name nothing. */
const addressOf = (path: string, siteId: string) =>
  `/api/v1${path.replace(':siteId', siteId).replace(':clockId', nothing).replace(':id', nothing).replace(':month', '2026-02').replace(':day', '2026-02-03').replace(':quarter', '2026-Q1').replace(':term', 'leachateMm')}`;

/** What the server says to a role that asks; writes carry an empty body, so that nothing is written. */
async function ask(
  agent: Agent,
  method: 'get' | 'post' | 'put',
  path: string,
  siteId: string,
): Promise<{ status: number; kind: string }> {
  const call = agent[method](addressOf(path, siteId));
  const response =
    method === 'get' ? await call : await call.set('Idempotency-Key', crypto.randomUUID()).send({});
  return {
    status: response.status,
    kind: String((response.body as { type?: string } | undefined)?.type ?? '').replace('/problems/', ''),
  };
}

/** A second organisation beside the demo, with its own administrator. */
async function foundOther(record: TestRecord): Promise<void> {
  const [organisationId, personId] = [crypto.randomUUID(), crypto.randomUUID()];
  await record.admin.query(
    `insert into organisations (id, name, is_demo) values ($1, 'Other Waste', false)`,
    [organisationId],
  );
  await record.admin.query(
    `insert into people (id, email, display_name, password_hash) values ($1, 'other@other.example', 'O. Ther', $2)`,
    [personId, await hashPassword('four plain words here')],
  );
  await record.admin.query(
    `insert into memberships (organisation_id, id, person_id, role) values ($1, gen_random_uuid(), $2, 'admin')`,
    [organisationId, personId],
  );
}

describe('every route × role × organisation', () => {
  let record: TestRecord;
  let siteId: string;
  let stranger: Agent;
  const agents = new Map<Role, Agent>();

  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    for (const role of roles) agents.set(role, await record.as(role));
    siteId = await siteIdOf(agents.get('operator')!);
    stranger = record.visitor();
    await foundOther(record);
    await stranger
      .post('/api/v1/sign-in')
      .send({ email: 'other@other.example', password: 'four plain words here' })
      .expect(201);
  });
  afterAll(() => record.close());

  it('the table names a permission for every route and a route for every permission', () => {
    const used = new Set(allRoutes.map((route) => route.permission));
    expect(
      allRoutes.filter((route) => route.permission !== 'signed-in' && !(route.permission in permissionTable)),
    ).toEqual([]);
    expect(
      Object.keys(permissionTable).filter(
        (permission) => !used.has(permission as keyof typeof permissionTable),
      ),
    ).toEqual([]);
  });

  it.each(allRoutes.map((route) => [`${route.method} ${route.path}`, route] as const))(
    '%s',
    async (_name, route) => {
      const unsigned = await ask(record.visitor(), route.method, route.path, siteId);
      expect(unsigned, 'signed out').toEqual({ status: 401, kind: 'not-signed-in' });
      for (const [role, agent] of agents) {
        const answer = await ask(agent, route.method, route.path, siteId);
        const may = route.permission === 'signed-in' || isAllowed([role], route.permission);
        if (may) expect(answer.kind, role).not.toBe('not-allowed');
        else expect(answer, role).toEqual({ status: 403, kind: 'not-allowed' });
        expect(answer.status, role).toBeLessThan(500);
      }
      if (!route.path.includes(':siteId')) return;
      const outside = await ask(stranger, route.method, route.path, siteId);
      expect(outside, 'an administrator of another organisation').toEqual({ status: 404, kind: 'not-found' });
    },
  );
});
