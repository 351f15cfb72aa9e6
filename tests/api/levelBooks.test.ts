import { beforeAll, describe, expect, it } from 'vitest';
import { levelRun } from './fixtures/levels';
import { minutesAgo } from './fixtures/moments';
import { expectProblem, places } from './fixtures/problems';
import { document, newSiteOrganization, type SiteOrganization } from './fixtures/site';

const BOOK = `point,backsight,backsightDistance,intermediate,foresight,foresightDistance
BM-1,5,100,,,
STAKE-1,,,4.2,,
TP-1,5,100,,6.65,100
HT-2,,,,-0.4,100
`;

describe('a level book as a table', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await site.admin.post(site.at('/instruments'), { name: 'LV-1', kind: 'level' }).expect(201);
  });

  const post = (csv: string, query: string) =>
    site.admin
      .post(site.at(`/uploads${query}`))
      .set('Content-Type', 'text/csv')
      .send(csv);

  it('is a run of the same name as its upload, reduced like any other', async () => {
    const observedAt = encodeURIComponent(minutesAgo(30));
    const query = `?length=ft&clientId=table-1&instrument=LV-1&observedAt=${observedAt}`;
    const first = await post(BOOK, query).expect(201);
    expect(first.body.upload).toMatchObject({
      clientId: 'table-1',
      mediaType: 'text/csv',
      counts: { accepted: 1, refused: 0 },
    });
    const [run] = first.body.levelRuns;
    expect(run).toMatchObject({
      clientId: 'table-1',
      from: 'BM-1',
      to: 'HT-2',
      instrument: 'LV-1',
      verdict: 'pass',
    });
    expect(run.points.map((p: { point: string }) => p.point)).toEqual(['BM-1', 'STAKE-1', 'TP-1', 'HT-2']);
    expect(run.points[1]).toMatchObject({ kind: 'intermediate', intermediate: 4.2 });
    // The same table again answers the first receipt; the same table said to be of another level is another upload.
    const again = await post(BOOK, query).expect(200);
    expect(again.body).toEqual(first.body);
    const other = await post(BOOK, '?length=ft&clientId=table-1');
    expectProblem(other, 'upload_conflict');
    const raw = await site.admin.get(site.at(`/uploads/${first.body.upload.id}/raw`)).expect(200);
    expect(Buffer.from(raw.body).toString()).toBe(BOOK);
  });

  it('is refused with its rows and columns, or with what its address lacks', async () => {
    const errors = async (csv: string, query: string) => {
      const { body, status } = await post(csv, query);
      return [status, body.code, places(body.errors).sort()];
    };
    const query = (clientId: string) => `?length=ft&clientId=${clientId}`;
    expect(await errors(BOOK, '?clientId=t-2')).toEqual([422, 'invalid', ['?length units_required']]);
    expect(await errors(BOOK, '?length=ft')).toEqual([422, 'invalid', ['?clientId required']]);
    expect(await errors(BOOK.replace('4.2', '4,2'), query('t-3'))).toEqual([
      422,
      'invalid',
      ['/rows/3 row_malformed'],
    ]);
    expect(await errors(BOOK.replace('4.2', 'four'), query('t-4'))).toEqual([
      422,
      'invalid',
      ['/rows/3/intermediate wrong_type'],
    ]);
    expect(await errors(BOOK.replace('6.65,100', '6.65,'), query('t-5'))).toEqual([
      422,
      'nothing_accepted',
      ['/rows/4/foresightDistance sight_distance_missing'],
    ]);
    expect(await errors(BOOK.replace('BM-1', 'NOWHERE'), query('t-6'))).toEqual([
      422,
      'nothing_accepted',
      ['/rows/2/point benchmark_unknown'],
    ]);
    expect(await errors(BOOK.replace('TP-1', '/x'), query('t-7'))).toEqual([
      422,
      'nothing_accepted',
      ['/rows/4/point name_invalid'],
    ]);
    expect(await errors(BOOK, `${query('t-8')}&instrument=TS-1`)).toEqual([
      422,
      'nothing_accepted',
      ['?instrument instrument_not_level'],
    ]);
    expect(await errors(BOOK.replaceAll('\n', '\n\n').replace('-0.4', '6666'), query('t-9'))).toEqual([
      422,
      'nothing_accepted',
      ['/rows/9/foresight invalid_value'],
    ]);
    expect(await errors('point,backsight,foresight\n', query('t-10'))).toEqual([
      422,
      'invalid',
      ['/rows required'],
    ]);
    expect(await errors('point,height\nA,1\n', query('t-11'))).toEqual([
      422,
      'invalid',
      ['/rows/1 column_missing', '/rows/1 column_missing', '/rows/1/2 column_unknown'],
    ]);
    expect(await errors(BOOK, '?length=ftUS&clientId=t-12')).toEqual([
      422,
      'invalid',
      ['?length units_conflict'],
    ]);
    await post(BOOK, '?length=ftUS&clientId=t-12&confirmUnits=true').expect(201);
    // What was refused is kept, byte for byte.
    const { body } = await site.admin.get(site.at('/uploads?status=refused&limit=1'));
    expect(body.data[0]).toMatchObject({ mediaType: 'text/csv', size: BOOK.length });
  });

  it('alone takes its names from the address', async () => {
    const sent = document('json', { levelRuns: [levelRun('json')] });
    const answer = await site.admin.post(site.at('/uploads?clientId=other'), sent);
    expectProblem(answer, 'invalid', ['?clientId mutually_exclusive']);
    const text = await site.admin.post(site.at('/uploads')).set('Content-Type', 'text/plain').send('5.1');
    expect([text.status, text.headers.accept]).toEqual([415, 'application/json, text/csv']);
  });
});
