// Screening list, training skills and capability items as data, and their judgement. A protocol may add items, not
// remove absolute ones. Few are proven harms (Antal et al. 2017); the classes follow common practice in trials.

import { z } from 'zod';

/** absolute = excluded, no override; relative = a clinician writes why to go on; ask = recorded, decides nothing. */
export type ScreeningClass = 'absolute' | 'relative' | 'ask';
export type ScreeningItem = { readonly id: string; readonly class: ScreeningClass; readonly source: string };

const practice = 'common practice';

export const screeningItems: readonly ScreeningItem[] = [
  { id: 'head_implant', class: 'absolute', source: practice },
  { id: 'head_metal_fragment', class: 'absolute', source: practice },
  { id: 'active_implant_elsewhere', class: 'absolute', source: practice },
  { id: 'skull_opening', class: 'absolute', source: practice },
  { id: 'skin_at_pad', class: 'absolute', source: 'Loo et al. 2011; letter in Cutis 2020' },
  { id: 'current_mania_or_psychosis', class: 'absolute', source: 'Berlow et al. 2019' },
  { id: 'suicidal_intent', class: 'absolute', source: practice },
  { id: 'cannot_follow_no_helper', class: 'absolute', source: 'Charvet et al. 2015' },
  { id: 'minor_without_protocol', class: 'absolute', source: 'Buchanan et al. 2021; Kessler et al. 2013' },
  { id: 'recent_stroke_or_head_injury', class: 'absolute', source: 'common practice; 3 months are own choice' },
  { id: 'shunt_or_plate_away_from_pads', class: 'relative', source: practice },
  { id: 'seizure_ever', class: 'relative', source: practice },
  { id: 'threshold_medicine', class: 'relative', source: practice },
  { id: 'bipolar_or_switch', class: 'relative', source: 'Berlow et al. 2019; Brunoni et al. 2017' },
  { id: 'pregnancy', class: 'relative', source: 'common practice; Antal et al. 2026' },
  { id: 'migraine_or_daily_headache', class: 'relative', source: practice },
  { id: 'stroke_surgery_tumour', class: 'relative', source: practice },
  { id: 'other_brain_stimulation', class: 'relative', source: practice },
  { id: 'bad_reaction_or_faints', class: 'relative', source: practice },
  { id: 'reduced_skin_feeling', class: 'relative', source: practice },
  { id: 'impairment_needs_helper', class: 'relative', source: 'Charvet et al. 2015' },
];

/** R9: each signed by a coordinator (Charvet et al. 2015; tele-monitored tDCS, J NeuroEng Rehabil 2019). */
export const trainingSkills: readonly string[] = [
  'identify_device',
  'wet_and_place',
  'check_contact',
  'start',
  'log',
  'stop',
  'fault_recovery',
  'skin_check',
  'cleaning',
  'emergency',
];

/** R5, the person's own or a named helper's (Charvet et al. 2015, 2020). */
const personItems: readonly string[] = ['reading', 'hand_use', 'mirror_work', 'phone_use', 'language'];
/** R6 and R7, which no helper replaces (common practice). */
const homeItems: readonly string[] = [
  'quiet_seat',
  'light',
  'water',
  'no_water_hazard',
  'no_driving_or_cooking',
  'phone_fallback',
  'emergency_address',
  'emergency_contact',
  'person_reachable',
];
export const capabilityItems: readonly string[] = [...personItems, ...homeItems];

export const screeningAnswersSchema = z.record(
  z.string().max(60),
  z.strictObject({
    answer: z.enum(['yes', 'no', 'not_known']),
    /** Why to go on, of a relative item. */
    reason: z.string().trim().min(1).max(2000).optional(),
  }),
);
export type ScreeningAnswers = z.infer<typeof screeningAnswersSchema>;

export type ScreeningJudgement = {
  readonly complete: boolean;
  readonly outcome: 'clear' | 'excluded' | 'incomplete';
  /** Not answered, or "not known": that blocks until staff resolve it. */
  readonly open: readonly string[];
  /** Relative and yes, without a reason for going on. */
  readonly needsReason: readonly string[];
  /** Relative and yes, with one: a clinician's decision. */
  readonly reasoned: readonly string[];
  /** Absolute and yes. */
  readonly excludedBy: readonly string[];
  /** Ids that are no item of the list. */
  readonly unknown: readonly string[];
};

export function judgeScreening(answers: ScreeningAnswers): ScreeningJudgement {
  const idsOf = (holds: (item: ScreeningItem) => boolean) => screeningItems.filter(holds).map(({ id }) => id);
  const isYes = (item: ScreeningItem, is: ScreeningClass) => item.class === is && answers[item.id]?.answer === 'yes';
  const hasReason = ({ id }: ScreeningItem) => (answers[id]?.reason ?? '').trim() !== '';
  const open = idsOf(({ id }) => answers[id] === undefined || answers[id].answer === 'not_known');
  const needsReason = idsOf((item) => isYes(item, 'relative') && !hasReason(item));
  const excludedBy = idsOf((item) => isYes(item, 'absolute'));
  const unknown = Object.keys(answers).filter((id) => !screeningItems.some((item) => item.id === id));
  const complete = open.length === 0 && needsReason.length === 0 && unknown.length === 0;
  return {
    complete,
    outcome: excludedBy.length > 0 ? 'excluded' : complete ? 'clear' : 'incomplete',
    open,
    needsReason,
    reasoned: idsOf((item) => isYes(item, 'relative') && hasReason(item)),
    excludedBy,
    unknown,
  };
}

export type TrainingJudgement = {
  readonly complete: boolean;
  /** Skills not seen, and items that neither the person nor a helper has. */
  readonly open: readonly string[];
  readonly unknown: readonly string[];
};

/** Signed off when every skill was seen and every item is there; a named helper stands in for the person's own. */
export function judgeTraining(given: {
  readonly skills: Readonly<Record<string, boolean>>;
  readonly capability: Readonly<Record<string, boolean>>;
  readonly hasHelper: boolean;
}): TrainingJudgement {
  const { skills, capability, hasHelper } = given;
  const open = [
    ...trainingSkills.filter((id) => skills[id] !== true),
    // A helper stands in for what was looked at and found wanting, not for what nobody looked at.
    ...personItems.filter((id) => capability[id] !== true && !(hasHelper && capability[id] === false)),
    ...homeItems.filter((id) => capability[id] !== true),
  ];
  const unknown = [
    ...Object.keys(skills).filter((id) => !trainingSkills.includes(id)),
    ...Object.keys(capability).filter((id) => !capabilityItems.includes(id)),
  ];
  return { complete: open.length === 0 && unknown.length === 0, open, unknown };
}
