// How a row of the worklist is said: its tag, its sentence, its next action, where it leads. Codes come from the server.

import type { TFunction } from 'i18next';
import type { Href } from 'expo-router';
import type { StateTone } from '@/components/ui/theme';
import type { WorklistItem } from '@/shared/contracts/worklist';

const tones: Readonly<Record<WorklistItem['level'], StateTone>> = {
  safety: 'stop',
  review: 'stop',
  look: 'caution',
  device: 'caution',
  flag: 'caution',
  due: 'muted',
};

export function toneOf(item: WorklistItem): StateTone {
  return tones[item.level];
}

/** "Headache 7 of 10 after session 8": the fuller sentence where the facts that it speaks of came along. */
export function sentenceOf(item: Pick<WorklistItem, 'why' | 'facts'>, t: TFunction): string {
  const facts = Object.fromEntries(Object.entries(item.facts).map(([name, value]) => [name, value ?? '']));
  const said = typeof facts.effect === 'string' ? { ...facts, effect: t(`diary:effect.${facts.effect}`) } : facts;
  const plain = `worklist:why.${item.why}`;
  return t(Object.keys(said).length > 0 ? [`${plain}_full`, plain] : plain, said);
}

/** Where the one next action leads. */
export function nextOf(item: WorklistItem): Href {
  const params = { participantId: item.participantId };
  switch (item.next) {
    case 'sign':
      return { pathname: '/participants/[participantId]/prescription', params: { ...params, ...(item.prescriptionId ? { prescriptionId: item.prescriptionId } : {}) } };
    case 'train':
      return { pathname: '/participants/[participantId]/training', params };
    case 'device':
      return { pathname: '/participants/[participantId]/equipment', params };
    case 'review':
    case 'open_session':
    case 'call':
    case 'look':
      return { pathname: '/review/[itemId]', params: { itemId: item.id } };
  }
}
