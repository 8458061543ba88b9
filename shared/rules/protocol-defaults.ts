// What a site's protocol says until the site signs its own numbers. Only defaults: what is allowed stands in the contract and the ceilings.

import { defaultSiteLimits } from './site-limits';

/** Everything but the contacts and the instant of the consent's version, which only the site knows. */
export const protocolDefaults = {
  limits: defaultSiteLimits,
  /** The first document. */
  consentVersion: 1,
  /** Guidance R3: a screening is over after 90 days. Own choice. */
  screeningValidDays: 90,
  /** Guidance R11: a sign-off ends after 180 days. Own choice. */
  trainingValidDays: 180,
  /** Guidance R10: the first session is watched (Charvet et al. 2015). */
  watchedSessionsRequired: 1,
  /** Guidance §1: pregnancy is a relative item unless the protocol makes it absolute. Common practice. */
  excludesPregnancy: false,
  /** Guidance R42 asks for a check in mood courses only, so none by default. */
  moodCheckEveryDays: null,
  /** Common record duty for clinical records; the site's own law comes first. Own choice. */
  retentionYears: 10,
} as const;

/** Supplies: uses and days after opening; null = no count of uses. Guidance R56 (own choice; saline: common practice). */
export const supplyLife = {
  sponge: { maxUses: 10, maxDays: 14 },
  saline: { maxUses: null, maxDays: 28 },
  // Six months of rubber.
  insert: { maxUses: null, maxDays: 182 },
} as const;

/** A site's first settings, ready for its administrator to read, change and sign. */
export function defaultProtocolSettings(own: {
  contacts: { name: string; email: string; phone: string }[];
  consentRequiredFrom: string;
}) {
  return { ...protocolDefaults, ...own };
}
