// Every screen address with the roles it serves; app/ has one file for each (a test compares both ways).

import type { Who } from './contract';

export interface ScreenDoor {
  path: string;
  group: '' | '(public)' | '(participant)' | '(caregiver)' | '(clinician)' | '(admin)';
  who: readonly Who[];
  demo?: true;
}

const anyone: readonly Who[] = ['anyone', 'participant', 'caregiver', 'coordinator', 'clinician', 'monitor', 'administrator'];
const participant: readonly Who[] = ['participant'];
const caregiver: readonly Who[] = ['caregiver'];
const records: readonly Who[] = ['coordinator', 'clinician', 'monitor'];
const care: readonly Who[] = ['coordinator', 'clinician'];
const staff: readonly Who[] = ['coordinator', 'clinician', 'monitor', 'administrator'];

export const screens: readonly ScreenDoor[] = [
  { path: '/', group: '', who: anyone },
  { path: '/sign-in', group: '(public)', who: anyone },
  { path: '/second-factor', group: '(public)', who: anyone },
  { path: '/invitation', group: '(public)', who: anyone },
  { path: '/forgot-password', group: '(public)', who: anyone },
  { path: '/reset-password', group: '(public)', who: anyone },
  { path: '/stop-mails', group: '(public)', who: anyone },
  { path: '/demo/mail', group: '(public)', who: anyone, demo: true },
  { path: '/today', group: '(participant)', who: participant },
  { path: '/acknowledge', group: '(participant)', who: participant },
  { path: '/precheck', group: '(participant)', who: participant },
  { path: '/set-up', group: '(participant)', who: participant },
  { path: '/run', group: '(participant)', who: participant },
  { path: '/diary', group: '(participant)', who: participant },
  { path: '/diary/[sessionId]', group: '(participant)', who: participant },
  { path: '/receipt/[sessionId]', group: '(participant)', who: participant },
  { path: '/course', group: '(participant)', who: participant },
  { path: '/help', group: '(participant)', who: participant },
  { path: '/messages', group: '(participant)', who: participant },
  { path: '/me', group: '(participant)', who: participant },
  { path: '/me/caregivers', group: '(participant)', who: participant },
  { path: '/shared', group: '(caregiver)', who: caregiver },
  { path: '/shared/[participantId]', group: '(caregiver)', who: caregiver },
  { path: '/worklist', group: '(clinician)', who: records },
  { path: '/participants', group: '(clinician)', who: records },
  { path: '/participants/new', group: '(clinician)', who: care },
  { path: '/participants/[participantId]', group: '(clinician)', who: records },
  { path: '/participants/[participantId]/consent', group: '(clinician)', who: care },
  { path: '/participants/[participantId]/screening', group: '(clinician)', who: care },
  { path: '/participants/[participantId]/training', group: '(clinician)', who: care },
  { path: '/participants/[participantId]/equipment', group: '(clinician)', who: records },
  { path: '/participants/[participantId]/prescription', group: '(clinician)', who: records },
  { path: '/participants/[participantId]/messages', group: '(clinician)', who: care },
  { path: '/participants/[participantId]/sessions/[sessionId]', group: '(clinician)', who: records },
  { path: '/review/[itemId]', group: '(clinician)', who: care },
  { path: '/reports', group: '(clinician)', who: records },
  { path: '/audit', group: '(admin)', who: ['clinician', 'monitor', 'administrator'] },
  { path: '/devices', group: '(admin)', who: staff },
  { path: '/protocols', group: '(admin)', who: staff },
  { path: '/site', group: '(admin)', who: staff },
  { path: '/site/qualification', group: '(admin)', who: staff },
  { path: '/account', group: '(admin)', who: staff },
];
