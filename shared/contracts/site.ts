// Sites, their staff and their protocols (site limits, versions, contacts). Administrators write, staff read.

import { z } from 'zod';
import {
  Email,
  Instant,
  Line,
  PasswordAgain,
  PersonName,
  Phone,
  Uuid,
  Zone,
  pageOf,
  pageQuery,
} from '@/shared/values/primitives';
import { ProtocolSettings } from '@/shared/values/protocol-settings';
import { staffRoles } from '@/shared/values/roles';
import { SiteContact } from './account';
import { contract } from './contract';

export const SiteView = SiteContact.extend({ kind: z.enum(['service', 'research']), createdAt: Instant });

export const listSites = contract({
  name: 'site.list',
  method: 'GET',
  path: '/api/sites',
  who: staffRoles,
  reach: 'site',
  query: z.strictObject(pageQuery),
  answer: pageOf(SiteView),
  about: 'Sites that the asker belongs to.',
});

export const addSite = contract({
  name: 'site.add',
  method: 'POST',
  path: '/api/sites',
  who: ['administrator'],
  reach: 'site',
  once: true,
  body: z.strictObject({
    name: Line,
    code: z
      .string()
      .trim()
      .regex(/^[A-Z]{2,4}$/),
    kind: z.enum(['service', 'research']),
    phone: Phone,
    emergencyNumber: z
      .string()
      .trim()
      .regex(/^[0-9]{2,6}$/),
    zone: Zone,
  }),
  answer: SiteView,
  status: 201,
  refusals: ['site.code_taken'],
  touches: ['site', 'account'],
  about: 'Adds a site; the administrator who adds it belongs to it.',
  example: {
    body: {
      name: 'Harbour House',
      code: 'HH',
      kind: 'service',
      phone: '020 7946 0300',
      emergencyNumber: '999',
      zone: 'Europe/London',
    },
  },
});

export const StaffView = z.strictObject({
  accountId: z.string().nullable(),
  invitationId: Uuid.nullable(),
  name: z.string(),
  email: z.string(),
  role: z.enum(staffRoles),
  siteIds: z.array(Uuid),
  state: z.enum(['invited', 'active', 'suspended']),
  secondFactor: z.boolean(),
  since: Instant,
});

export const listStaff = contract({
  name: 'site.list-staff',
  method: 'GET',
  path: '/api/staff',
  who: ['administrator', 'clinician', 'coordinator', 'monitor'],
  reach: 'site',
  query: z.strictObject({ ...pageQuery, siteId: Uuid.optional() }),
  answer: pageOf(StaffView),
  about: 'Staff of own sites.',
});

export const inviteStaff = contract({
  name: 'site.invite-staff',
  method: 'POST',
  path: '/api/staff',
  who: ['administrator'],
  reach: 'site',
  once: true,
  body: z.strictObject({ email: Email, name: PersonName, role: z.enum(staffRoles), siteId: Uuid }),
  answer: StaffView,
  status: 201,
  refusals: ['staff.address_taken'],
  touches: ['site'],
  about: 'Invites a member of staff to an own site by mail.',
  example: {
    body: {
      email: 'tobin.ashe@harrowmere.example',
      name: 'Tobin Ashe',
      role: 'coordinator',
      siteId: '7d2a9e4c-3b5f-4d6e-8a1c-0f9e8d7c6b5a',
    },
  },
});

export const suspendStaff = contract({
  name: 'site.suspend-staff',
  method: 'POST',
  path: '/api/staff/:accountId/suspension',
  who: ['administrator'],
  reach: 'site',
  once: true,
  params: z.strictObject({ accountId: z.string().min(1).max(60) }),
  body: z.strictObject({ suspended: z.boolean(), reason: Line }),
  answer: StaffView,
  refusals: ['staff.oneself'],
  touches: ['site'],
  about: 'Suspends a member of staff, or lets them back; a suspension ends their sessions at once.',
  example: { body: { suspended: true, reason: 'Has left the clinic' } },
});

/** Its shape stands with the values, since rules and queries read it too. */
export { ProtocolSettings } from '@/shared/values/protocol-settings';

export const ProtocolView = z.strictObject({
  id: Uuid,
  siteId: Uuid,
  siteName: z.string(),
  version: z.number().int(),
  settings: ProtocolSettings,
  reason: z.string(),
  signedBy: z.string(),
  signedAt: Instant,
  current: z.boolean(),
});

export const listProtocols = contract({
  name: 'protocol.list',
  method: 'GET',
  path: '/api/protocols',
  who: staffRoles,
  reach: 'site',
  query: z.strictObject({ ...pageQuery, siteId: Uuid.optional(), all: z.enum(['true', 'false']).default('false') }),
  answer: pageOf(ProtocolView),
  about: 'Protocols of own sites: the current one of each, or every version.',
});

export const changeProtocol = contract({
  name: 'protocol.change',
  method: 'POST',
  path: '/api/protocols',
  who: ['administrator'],
  reach: 'site',
  once: true,
  confirm: true,
  body: z.strictObject({
    siteId: Uuid,
    /** The version that was on the screen; another one in force = 409 `version.stale`. */
    basedOnVersion: z.number().int().min(0),
    settings: ProtocolSettings,
    reason: Line,
    password: PasswordAgain,
  }),
  answer: ProtocolView,
  status: 201,
  refusals: ['version.stale', 'protocol.above_ceiling'],
  touches: ['protocol', 'clearance', 'prescription'],
  about: 'Signs a new version of a site’s protocol. No limit may exceed its ceiling.',
});
