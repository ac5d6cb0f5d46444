import type { APIRequestContext, APIResponse } from '@playwright/test';
import { addDays, instantAt, mondayOf } from '@strikeboard/domain/zone';
import { BoardApi, freshKey, type Problem, todayAt } from './board-api.ts';
import { accounts, companies, expect, test } from './fixtures.ts';

// Statuses are those of RFC 9110, sections 15.5.1 to 15.5.21; the body is a problem document of RFC 9457, section 3.
const { cedarFlat, prairieLine } = companies;
const NOBODY = '00000000-0000-7000-8000-000000000000';
// Beyond the days on which other tests arrange a board of their own.
const monday = addDays(mondayOf(todayAt(cedarFlat)), 56);

/** The answer's problem document, after its status and form are looked at. */
async function problemOf(answer: APIResponse, status: number, code: string): Promise<Problem> {
  const text = await answer.text();
  expect(answer.status(), text).toBe(status);
  expect(answer.headers()['content-type']).toMatch(/^application\/problem\+json\b/);
  const problem: Problem = JSON.parse(text);
  expect(problem).toMatchObject({
    ...{ status, code },
    type: expect.stringMatching(/^\/problems\/[a-z-]+$/),
    title: expect.stringMatching(/\S/),
    detail: expect.stringMatching(/\S/),
  });
  // Neither statements nor places in the code are anybody's business.
  expect(text).not.toMatch(/select |insert into|\.ts:\d+|node_modules/i);
  return problem;
}

const fieldsOf = (problem: Problem) => problem.errors?.map(({ field }) => field).sort();

test.describe('what cannot be is refused, and nothing of it is kept', () => {
  let request: APIRequestContext;
  let api: BoardApi;
  let before: number;

  test.beforeEach(async ({ apiAs }) => {
    request = await apiAs(accounts.dispatcher);
    api = new BoardApi(request, cedarFlat);
    before = await api.revision();
  });

  const post = (path: string, data: unknown, headers: Record<string, string> = {}) =>
    request.post(`/api/cedar-flat/${path}`, {
      headers: { 'content-type': 'application/json', 'Idempotency-Key': freshKey(), ...headers },
      data: typeof data === 'string' ? Buffer.from(data) : data,
    });
  const unchanged = async () => expect(await api.revision(), 'the revision of the board').toBe(before);

  test('JSON that is none: 400', async () => {
    for (const body of ['{"name": ', '', 'null null', '\xff\xfe'])
      await problemOf(await post('pours', body), 400, 'malformed');
    await unchanged();
  });

  test('no key, or one that is too short: 400', async () => {
    for (const key of ['', 'short', 'x'.repeat(129)]) {
      const problem = await problemOf(
        await post('visits', prep(NOBODY), { 'Idempotency-Key': key }),
        400,
        'malformed',
      );
      expect(fieldsOf(problem)).toEqual(['Idempotency-Key']);
    }
    await unchanged();
  });

  test('values of the wrong kind: 422, each field by its name with what is right', async () => {
    const problem = await problemOf(
      await post('pours', {
        ...{ siteId: 'the big one', name: '', orderedYd3: '12', areaFt2: -4, thicknessIn: '4 in' },
        ...{ finish: 'shiny', placingMethod: null, wantedOn: '2026-02-30', readiness: 'all' },
      }),
      422,
      'invalid',
    );
    expect(fieldsOf(problem)).toEqual(
      [
        ...['areaFt2', 'finish', 'name', 'orderedYd3', 'placingMethod'],
        ...['readiness', 'siteId', 'thicknessIn', 'wantedOn'],
      ].sort(),
    );
    expect(problem.errors?.find(({ field }) => field === 'orderedYd3')).toMatchObject({
      ...{ value: '12', expected: 'a number, 0.25 to 2000' },
    });
    expect(problem.errors?.find(({ field }) => field === 'wantedOn')).toMatchObject({
      ...{ value: '2026-02-30', expected: 'a day as YYYY-MM-DD' },
    });
    for (const { expected } of problem.errors ?? []) expect(expected).toMatch(/\S/);
    await unchanged();
  });

  test('a body that is no object, and a query that is none: 422', async () => {
    for (const body of ['[]', '"pour"', '7', 'null'])
      await problemOf(await post('pours', body), 422, 'invalid');
    for (const query of ['from=yesterday', 'from=2026-12-01&days=900', 'days=7'])
      await problemOf(await request.get(`/api/cedar-flat/board?${query}`), 422, 'invalid');
    await unchanged();
  });

  test('what is not there, and what cannot be an id: 404', async () => {
    const place = { crewId: NOBODY, crewStartMs: instantAt(monday, 480, cedarFlat.zone), baseVersion: 1 };
    const visit = await api.addPrep('Nowhere', { site: 'Windrow warehouse', wantedOn: monday });
    before = await api.revision();
    await problemOf(await post(`visits/${visit.id}/place`, place), 404, 'not-found');
    for (const id of [NOBODY, 'seven', "7' or 'x", '%']) {
      const path = `visits/${encodeURIComponent(id)}`;
      await problemOf(await post(`${path}/place`, place), 404, 'not-found');
      await problemOf(await post(`${path}/call-off`, { baseVersion: 1, reason: 'Rain' }), 404, 'not-found');
      await problemOf(await request.get(`/api/cedar-flat/${path}`), 404, 'not-found');
      await problemOf(await post(`changes/${encodeURIComponent(id)}/undo`, {}), 404, 'not-found');
    }
    await problemOf(await post('pours', pour(NOBODY)), 404, 'not-found');
    await unchanged();
  });

  test("another company's ids: 404, as if they were not there", async ({ apiAs }) => {
    const theirs = new BoardApi(await apiAs(accounts.otherDispatcher), prairieLine);
    const board = await theirs.read(todayAt(prairieLine), 14);
    const [visit] = board.visits;
    const [otherPour] = board.pours;
    const [crew] = board.crews;
    const [site] = board.sites;
    if (!visit || !otherPour || !crew || !site) throw new Error('The other demo company has work.');
    const own = await api.addPrep('Borrowed crew', { site: 'Windrow warehouse', wantedOn: monday });
    before = await api.revision();
    const start = { crewStartMs: instantAt(monday, 480, cedarFlat.zone), baseVersion: 1 };
    const nobodys = { title: 'Not found', code: 'not-found' };
    for (const answer of [
      await request.get(`/api/cedar-flat/visits/${visit.id}`),
      await post(`visits/${visit.id}/place`, { crewId: crew.id, ...start }),
      await post(`visits/${own.id}/place`, { crewId: crew.id, ...start }),
      await post(`visits/${visit.id}/wait`, { baseVersion: visit.version }),
      await api.patch(`pours/${otherPour.id}`, { baseVersion: otherPour.version, notes: 'Mine now' }),
      await post('pours', pour(site.id)),
      await request.get(`/api/prairie-line/visits/${visit.id}`),
      await request.get('/api/prairie-line/board?from=2026-12-01'),
      await request.get('/api/no-such-company/board?from=2026-12-01'),
    ])
      expect(await problemOf(answer, 404, 'not-found')).toMatchObject(nobodys);
    await unchanged();
    expect(await theirs.revision()).toBe(board.revision);
  });

  test('a version that has been passed: 409, with what is different', async () => {
    const visit = await api.addPrep('Stale', { site: 'Windrow warehouse', wantedOn: monday });
    const { crews } = await api.read(monday, 1);
    const crewId = crews[0]?.id ?? '';
    const place = { crewId, crewStartMs: instantAt(monday, 780, cedarFlat.zone), baseVersion: visit.version };
    await api.place(visit.id, place);
    before = await api.revision();
    const problem = await problemOf(
      await post(`visits/${visit.id}/place`, { ...place, crewStartMs: place.crewStartMs + 3_600_000 }),
      409,
      'stale-version',
    );
    expect(problem.changed).toEqual(expect.arrayContaining(['crewId', 'during', 'state']));
    await problemOf(
      await post(`visits/${visit.id}/wait`, { baseVersion: visit.version }),
      409,
      'stale-version',
    );
    await unchanged();

    const { pour: made } = await api.addPour('Stale pour', { site: 'Windrow warehouse', wantedOn: monday });
    const edit = { baseVersion: made.version, orderedYd3: 6 };
    expect((await api.patch(`pours/${made.id}`, edit)).status()).toBe(200);
    before = await api.revision();
    await problemOf(await api.patch(`pours/${made.id}`, { ...edit, orderedYd3: 7 }), 409, 'stale-version');
    await unchanged();
  });

  test('the same key again: the same answer and nothing twice; with another body: 409', async () => {
    const board = await api.read(monday, 1);
    const siteId = board.sites.find(({ name }) => name === 'Windrow warehouse')?.id ?? '';
    const key = { 'Idempotency-Key': freshKey() };
    const first = await post('visits', prep(siteId), key);
    expect(first.status(), await first.text()).toBe(200);
    const made = await api.revision();
    expect(made).toBe(before + 1);
    const again = await post('visits', prep(siteId), key);
    expect(again.status()).toBe(200);
    expect(await again.json()).toEqual(await first.json());
    const both = await Promise.all([post('visits', prep(siteId), key), post('visits', prep(siteId), key)]);
    for (const answer of both) expect(await answer.json()).toEqual(await first.json());
    expect(await api.revision()).toBe(made);
    await problemOf(await post('visits', { ...prep(siteId), title: 'Other' }, key), 409, 'key-reused');
    expect(await api.revision()).toBe(made);
    const after = await api.read(monday, 1);
    expect(after.visits.filter(({ title }) => title === 'Sent twice')).toHaveLength(1);
  });

  test('a stop and a missing reason: 422 with the findings, and nothing moves', async () => {
    const tuesday = addDays(monday, 1);
    const { visit } = await api.addPour('Early walk', { site: 'Larkbunting residence', wantedOn: tuesday });
    const { crews } = await api.read(tuesday, 1);
    const crewId = crews[0]?.id ?? '';
    before = await api.revision();
    const at = (minute: number) => ({
      ...{ crewId, crewStartMs: instantAt(tuesday, minute, cedarFlat.zone), baseVersion: visit.version },
    });
    // The site's hours are 7:00 to 18:00 (demo data).
    const stops = await problemOf(await post(`visits/${visit.id}/place`, at(300)), 422, 'stops');
    expect(stops.findings?.map(({ code }) => code)).toContain('site-hours');
    const reasons = await problemOf(await post(`visits/${visit.id}/place`, at(390)), 422, 'reason-needed');
    expect(reasons.findings?.map(({ code }) => code)).toContain('site-hours');
    const blank = { ...at(390), reasons: { 'site-hours': '   ' } };
    expect(fieldsOf(await problemOf(await post(`visits/${visit.id}/place`, blank), 422, 'invalid'))).toEqual([
      'reasons.site-hours',
    ]);
    await unchanged();
  });

  test('more than the limit: 413', async () => {
    const large = JSON.stringify({ ...pour(NOBODY), notes: 'x'.repeat(1024 * 1024) });
    await problemOf(await post('pours', large), 413, 'too-large');
    const sheet = Buffer.alloc(10 * 1024 * 1024 + 1, 'a');
    const upload = await request.post('/api/cedar-flat/imports?kind=pours&name=large.csv', {
      headers: { 'content-type': 'application/octet-stream' },
      data: sheet,
    });
    await problemOf(upload, 413, 'too-large');
    await unchanged();
  });

  test('another type of content: 415', async () => {
    for (const type of ['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data; boundary=x'])
      await problemOf(
        await post('pours', JSON.stringify(pour(NOBODY)), { 'content-type': type }),
        415,
        'wrong-type',
      );
    await unchanged();
  });

  test('a file that is empty: 400, or no spreadsheet: 422; and a method that is none of its own: 405', async () => {
    const upload = (name: string, data: Buffer) =>
      request.post(`/api/cedar-flat/imports?kind=pours&name=${name}`, {
        headers: { 'content-type': 'application/octet-stream' },
        data,
      });
    await problemOf(await upload('empty.csv', Buffer.alloc(0)), 400, 'malformed');
    await problemOf(
      await upload('photo.xlsx', Buffer.from('\x89PNG\r\n\x1a\n0000', 'latin1')),
      422,
      'invalid',
    );
    await problemOf(await upload('cut.xlsx', Buffer.from('PK\x03\x04cut short', 'latin1')), 422, 'invalid');
    const answer = await request.delete('/api/cedar-flat/pours');
    await problemOf(answer, 405, 'method-not-allowed');
    expect(answer.headers().allow).toContain('POST');
    await unchanged();
  });

  test('a page of another site: 403', async () => {
    const headers = { Origin: 'https://elsewhere.example.com', 'Sec-Fetch-Site': 'cross-site' };
    await problemOf(await post('pours', pour(NOBODY), headers), 403, 'foreign-origin');
    await unchanged();
  });
});

const prep = (siteId: string) => ({
  ...{ kind: 'prep', siteId, title: 'Sent twice', plannedMin: 60, wantedOn: monday },
});
const pour = (siteId: string) => ({
  ...{ siteId, name: 'Nobody’s', orderedYd3: 5, areaFt2: 300, thicknessIn: 4 },
  ...{ finish: 'broom', placingMethod: 'chute' },
});
