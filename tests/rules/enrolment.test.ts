// Who may be enrolled, what a recorded consent must say, who may record which screening.

import { consentRefusal, enrolmentRefusal, type ConsentGiven } from '@/shared/rules/enrolment';
import { screeningItems, type ScreeningAnswers } from '@/shared/rules/screening';
import { screeningRecord } from '@/shared/rules/screening-record';

const now = '2026-05-12T23:30:00.000Z';
const zone = 'Europe/London';

describe('enrolment', () => {
  it.each([
    ['2014-05-13', null],
    ['2014-05-14', 'participant.too_young'],
    ['2026-05-13', 'participant.too_young'],
    ['2026-05-14', 'participant.born_in_future'],
    ['2026-02-30', 'participant.born_in_future'],
    ['1950-01-01', null],
  ])('of somebody born on %s in London, where it is 13 May already, answers %s', (bornOn, code) => {
    expect(enrolmentRefusal({ bornOn, zone }, now)).toBe(code);
  });

  it('counts the day where the person lives', () => {
    expect(enrolmentRefusal({ bornOn: '2014-05-13', zone: 'America/New_York' }, now)).toBe('participant.too_young');
  });

  it('refuses when the clock cannot be read', () => {
    expect(enrolmentRefusal({ bornOn: '1950-01-01', zone }, '')).not.toBeNull();
  });
});

const given: ConsentGiven = {
  understandsPurpose: true,
  understandsRisks: true,
  understandsMayStop: true,
  agreesToDataUse: true,
  questionsAnswered: true,
  copyGiven: true,
  documentVersion: 2,
  signedOn: '2026-05-13',
};
const site = { newestVersion: 2, zone };

describe('a recorded consent', () => {
  it('is taken when all is understood, the version exists and the day has come', () => {
    expect(consentRefusal(given, site, now)).toBeNull();
    expect(consentRefusal({ ...given, documentVersion: 1 }, site, now)).toBeNull();
  });

  it.each([
    'understandsPurpose',
    'understandsRisks',
    'understandsMayStop',
    'agreesToDataUse',
    'questionsAnswered',
    'copyGiven',
  ] as const)('is none without %s', (name) => {
    expect(consentRefusal({ ...given, [name]: false }, site, now)).toEqual({
      code: 'consent.not_given',
      fields: [name],
    });
  });

  it.each([0, 3])('is of no known document with version %d', (documentVersion) => {
    expect(consentRefusal({ ...given, documentVersion }, site, now)?.code).toBe('consent.version_unknown');
  });

  it('cannot be signed tomorrow', () => {
    expect(consentRefusal({ ...given, signedOn: '2026-05-14' }, site, now)?.code).toBe('consent.signed_in_future');
    expect(consentRefusal(given, { ...site, zone: 'America/New_York' }, now)?.code).toBe('consent.signed_in_future');
  });
});

describe('a screening form', () => {
  const no: ScreeningAnswers = Object.fromEntries(screeningItems.map(({ id }) => [id, { answer: 'no' as const }]));
  const yes = (id: string, reason?: string): ScreeningAnswers => ({ ...no, [id]: { answer: 'yes', reason } });
  const open = { excludesPregnancy: false };

  it('with no to everything is clear, whoever records it', () => {
    expect(screeningRecord(no, 'coordinator', open)).toEqual({ refusal: null, outcome: 'clear' });
  });

  it('names an item that is not on the list', () => {
    const answers: ScreeningAnswers = { ...no, favourite_colour: { answer: 'no' } };
    expect(screeningRecord(answers, 'clinician', open).refusal).toEqual({
      code: 'screening.item_unknown',
      items: ['favourite_colour'],
    });
  });

  it('with a relative yes needs a reason, and a clinician who gives it', () => {
    expect(screeningRecord(yes('seizure_ever'), 'clinician', open).refusal?.code).toBe('screening.reason_missing');
    const reasoned = yes('seizure_ever', 'One febrile seizure at two years');
    expect(screeningRecord(reasoned, 'coordinator', open).refusal?.code).toBe('screening.clinician_decides');
    expect(screeningRecord(reasoned, 'clinician', open)).toEqual({ refusal: null, outcome: 'clear' });
  });

  it('excludes by an absolute item, whatever reason is given', () => {
    expect(screeningRecord(yes('head_implant', 'Old clip'), 'clinician', open)).toEqual({
      refusal: null,
      outcome: 'excluded',
    });
  });

  it('excludes pregnancy only where the protocol says so', () => {
    const pregnant = yes('pregnancy', 'Benefit weighed with obstetrics');
    expect(screeningRecord(pregnant, 'clinician', open)).toEqual({ refusal: null, outcome: 'clear' });
    expect(screeningRecord(pregnant, 'clinician', { excludesPregnancy: true })).toEqual({
      refusal: null,
      outcome: 'excluded',
    });
  });

  it('with something not known stays incomplete', () => {
    const answers: ScreeningAnswers = { ...no, seizure_ever: { answer: 'not_known' } };
    expect(screeningRecord(answers, 'clinician', open)).toEqual({ refusal: null, outcome: 'incomplete' });
  });
});
