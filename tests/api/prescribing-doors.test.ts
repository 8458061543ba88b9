// Prescribing over HTTP: what a person who was refused reads, the password that a signature asks for, roles and odd bodies.

import { Problem } from '@/shared/contracts/problem';
import { PrescriptionView } from '@/shared/contracts/prescription';
import { openTestHouse, password, type TestHouse } from '../support/house';
import { prescriptionFor, type Change } from '../support/prescribing';

let at: TestHouse;
let participantId: string;
let clinician: Awaited<ReturnType<TestHouse['signedIn']>>;
let coordinator: Awaited<ReturnType<TestHouse['signedIn']>>;

beforeAll(async () => {
  at = await openTestHouse();
  const siteId = await at.site('LS');
  clinician = await at.signedIn((await at.person('clinician', siteId)).email);
  coordinator = await at.signedIn((await at.person('coordinator', siteId)).email);
  participantId = (await at.person('participant', siteId)).participantId ?? '';
});
afterAll(() => at.close());

const bodyOf = async (change: Change = {}) => prescriptionFor({ participantId }, await at.house.transact.now(), change);

describe('a refused prescription', () => {
  it('says in a sentence for each field what is allowed, by which layer, from which source', async () => {
    const answer = await clinician.post('/api/prescriptions').send(await bodyOf({ dose: { intensityMilliamp: 4.1 } }));
    expect([answer.status, answer.type]).toEqual([409, 'application/problem+json']);
    const problem = Problem.parse(answer.body);
    expect(problem.code).toBe('prescription.over_limit');
    const current = problem.fields?.find(({ code }) => code === 'current');
    expect(current?.path).toBe('dose.intensityMilliamp');
    expect(current?.message).toMatch(/4\.1 mA.*4 mA.*ceiling.*Bikson et al\. 2016/);
  });

  it('leaves no placeholder and no bare code in any sentence', async () => {
    const schedules: Change['schedule'][] = [
      { hoursFrom: '08:00', hoursTo: '08:00' },
      { hoursFrom: '08:00', hoursTo: '08:05' },
      { days: [1, 1], minGapHours: 3, maxPer7Days: 1, startsOn: '2020-01-01', expiresOn: '2020-01-01' },
      { days: [1, 2], minGapHours: 100, expiresOn: '2099-01-01' },
      { maxPerDay: 2, minGapHours: 20, hoursTo: '12:00' },
      { sessionsTotal: 100 },
    ];
    const doses: Change['dose'][] = [
      { intensityMilliamp: 20, holdSeconds: 9000, rampUpSeconds: 0 },
      { intensityMilliamp: 0 },
      {
        electrodes: [
          { position: 'X9', polarity: 'anode', shape: 'pad', areaSquareCentimetre: 35, share: 0.5 },
          { position: 'X9', polarity: 'anode', shape: 'pad', areaSquareCentimetre: 35, share: 0 },
        ],
      },
    ];
    const changes: Change[] = [...schedules.map((schedule) => ({ schedule })), ...doses.map((dose) => ({ dose }))];
    for (const change of changes) {
      const answer = await clinician
        .post('/api/prescriptions')
        .send(await bodyOf(change))
        .expect(409);
      const { fields = [] } = Problem.parse(answer.body);
      expect(fields.length).toBeGreaterThan(0);
      for (const { message } of fields) {
        expect(message).toMatch(/^[A-Z0-9].*\.$/);
        expect(message).not.toMatch(/[{}$_]|undefined|errors:/);
      }
    }
  });
});

describe('a signature', () => {
  it('needs the password again, and counts nothing without it', async () => {
    const written = await clinician
      .post('/api/prescriptions')
      .send(await bodyOf())
      .expect(201);
    const draft = PrescriptionView.parse(written.body);
    const sign = (given: object) =>
      clinician
        .post(`/api/prescriptions/${draft.id}/sign`)
        .send({ contentHash: draft.contentHash, meaning: 'prescribed', ...given });
    const wrong = await sign({ password: 'not the password' });
    expect(wrong.status).toBeGreaterThanOrEqual(400);
    expect(wrong.status).toBeLessThan(500);
    expect(await at.rows('select 1 from signature where subject_id = $1', [draft.id])).toEqual([]);
    await sign({}).expect(422);
    const signed = PrescriptionView.parse((await sign({ password }).expect(200)).body);
    expect(signed).toMatchObject({ status: 'signed', version: 1 });
    expect((await clinician.get(`/api/courses/${signed.courseId}`).expect(200)).body.marks).toHaveLength(20);
  });
});

describe('a coordinator', () => {
  it('reads prescriptions and neither writes nor signs them', async () => {
    const list = await coordinator.get(`/api/participants/${participantId}/prescriptions`).expect(200);
    const [first] = list.body.items;
    await coordinator
      .post('/api/prescriptions')
      .send(await bodyOf())
      .expect(403);
    const body = { contentHash: first.contentHash, meaning: 'second_signature', password };
    await coordinator.post(`/api/prescriptions/${first.id}/sign`).send(body).expect(403);
  });
});

describe('an odd body', () => {
  it('is named field by field and reaches no rule', async () => {
    const good = await bodyOf();
    const odd = {
      ...good,
      dose: { ...good.dose, intensityMilliamp: 'two', sham: true },
      schedule: { ...good.schedule, days: [] },
    };
    const answer = await clinician.post('/api/prescriptions').send(odd).expect(422);
    const paths = Problem.parse(answer.body).fields?.map(({ path }) => path);
    expect(paths).toEqual(expect.arrayContaining(['dose.intensityMilliamp', 'dose.sham', 'schedule.days']));
    await clinician.get('/api/worklist?cursor=nonsense').expect(422);
    await clinician.get('/api/worklist?limit=0').expect(422);
  });
});
