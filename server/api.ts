// The table of all actions: a door without its action here does not compile, and the other way round.

import type { Doors } from '@/shared/contracts/doors';
import type { Action } from '@/server/action';
import { acceptInvitation } from '@/server/features/account/accept-invitation';
import { acknowledgePrescription } from '@/server/features/prescription/acknowledge-prescription';
import { addDevice } from '@/server/features/device/add-device';
import { addPhoto } from '@/server/features/photo/add-photo';
import { addSite } from '@/server/features/site/add-site';
import { answerPrecheck } from '@/server/features/precheck/answer-precheck';
import { assignDevice } from '@/server/features/device/assign-device';
import { changeDeviceState } from '@/server/features/device/change-device-state';
import { changeProtocol } from '@/server/features/protocol/change-protocol';
import { changeShares } from '@/server/features/caregiver/change-shares';
import { claimItem } from '@/server/features/worklist/claim-item';
import { enrolParticipant } from '@/server/features/participant/enrol-participant';
import { exportOwn } from '@/server/features/report/export-own';
import { exportSessions } from '@/server/features/report/export-sessions';
import { giveSupply } from '@/server/features/supply/give-supply';
import { inviteAgain } from '@/server/features/participant/invite-again';
import { inviteCaregiver } from '@/server/features/caregiver/invite-caregiver';
import { inviteStaff } from '@/server/features/site/invite-staff';
import { issuePermit } from '@/server/features/permit/issue-permit';
import { joinByInvitation } from '@/server/features/account/join-by-invitation';
import { listCaregivers } from '@/server/features/caregiver/list-caregivers';
import { listDemoAccounts } from '@/server/demo/list-demo-accounts';
import { listDemoMail } from '@/server/demo/list-demo-mail';
import { listDevices } from '@/server/features/device/list-devices';
import { listDiary } from '@/server/features/diary/list-diary';
import { listMessages } from '@/server/features/message/list-messages';
import { listParticipants } from '@/server/features/participant/list-participants';
import { listPrescriptions } from '@/server/features/prescription/list-prescriptions';
import { listProtocols } from '@/server/features/protocol/list-protocols';
import { listReviews } from '@/server/features/review/list-reviews';
import { listSites } from '@/server/features/site/list-sites';
import { listStaff } from '@/server/features/site/list-staff';
import { listSupplies } from '@/server/features/supply/list-supplies';
import { lookAtInvitation } from '@/server/features/account/look-at-invitation';
import { moveDemoClock } from '@/server/demo/move-demo-clock';
import { pauseCourse } from '@/server/features/course/pause-course';
import { readAudit } from '@/server/features/audit/read-audit';
import { readClearance } from '@/server/features/clearance/read-clearance';
import { readCourse } from '@/server/features/course/read-course';
import { readHealth } from '@/server/house/read-health';
import { readMe } from '@/server/features/account/read-me';
import { readOwnDevice } from '@/server/features/device/read-own-device';
import { readParticipant } from '@/server/features/participant/read-participant';
import { readPermit } from '@/server/features/permit/read-permit';
import { readPermitKeys } from '@/server/features/permit/read-permit-keys';
import { readPhoto } from '@/server/features/photo/read-photo';
import { readPrescription } from '@/server/features/prescription/read-prescription';
import { readQualification } from '@/server/features/qualification/read-qualification';
import { readSession } from '@/server/features/session/read-session';
import { readShared } from '@/server/features/caregiver/read-shared';
import { readSharedDiary } from '@/server/features/caregiver/read-shared-diary';
import { readSiteReport } from '@/server/features/report/read-site-report';
import { readTimeline } from '@/server/features/participant/read-timeline';
import { readTrends } from '@/server/features/participant/read-trends';
import { readWorklist } from '@/server/features/worklist/read-worklist';
import { recordConsent } from '@/server/features/consent/record-consent';
import { recordReview } from '@/server/features/review/record-review';
import { recordScreening } from '@/server/features/screening/record-screening';
import { recordTraining } from '@/server/features/training/record-training';
import { recordWatchedSession } from '@/server/features/training/record-watched-session';
import { removeCaregiver } from '@/server/features/caregiver/remove-caregiver';
import { rescheduleSession } from '@/server/features/course/reschedule-session';
import { runQualification } from '@/server/features/qualification/run-qualification';
import { sendEvents } from '@/server/features/session/send-events';
import { sendMessage } from '@/server/features/message/send-message';
import { setCaregiverCode } from '@/server/features/caregiver/set-caregiver-code';
import { signPrescription } from '@/server/features/prescription/sign-prescription';
import { stopMails } from '@/server/features/account/stop-mails';
import { suspendStaff } from '@/server/features/site/suspend-staff';
import { withdrawParticipant } from '@/server/features/participant/withdraw-participant';
import { writeDiary } from '@/server/features/diary/write-diary';
import { writePrescription } from '@/server/features/prescription/write-prescription';

export const api: { readonly [Name in keyof Doors]: Action<Doors[Name]> } = {
  readHealth,
  listDemoAccounts,
  listDemoMail,
  moveDemoClock,
  readMe,
  lookAtInvitation,
  acceptInvitation,
  joinByInvitation,
  stopMails,
  listSites,
  addSite,
  listStaff,
  inviteStaff,
  suspendStaff,
  listProtocols,
  changeProtocol,
  listParticipants,
  enrolParticipant,
  inviteAgain,
  readParticipant,
  readTimeline,
  readTrends,
  withdrawParticipant,
  recordConsent,
  recordScreening,
  recordTraining,
  recordWatchedSession,
  listDevices,
  addDevice,
  assignDevice,
  changeDeviceState,
  listSupplies,
  giveSupply,
  writePrescription,
  readPrescription,
  listPrescriptions,
  signPrescription,
  acknowledgePrescription,
  readCourse,
  pauseCourse,
  rescheduleSession,
  readClearance,
  answerPrecheck,
  issuePermit,
  readPermit,
  readPermitKeys,
  readOwnDevice,
  sendEvents,
  readSession,
  writeDiary,
  listDiary,
  addPhoto,
  readPhoto,
  readWorklist,
  claimItem,
  recordReview,
  listReviews,
  listCaregivers,
  inviteCaregiver,
  changeShares,
  removeCaregiver,
  readShared,
  readSharedDiary,
  setCaregiverCode,
  listMessages,
  sendMessage,
  readAudit,
  readSiteReport,
  exportSessions,
  exportOwn,
  readQualification,
  runQualification,
};
