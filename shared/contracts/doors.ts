// Every door of the house: what Express mounts, what the client may call, what the access matrix walks.
// A door that is not in this list does not exist.

import { readHealth, listDemoAccounts, listDemoMail, moveDemoClock } from './house';
import { readMe, lookAtInvitation, acceptInvitation, joinByInvitation, stopMails } from './account';
import { listSites, addSite, listStaff, inviteStaff, suspendStaff, listProtocols, changeProtocol } from './site';
import {
  listParticipants,
  enrolParticipant,
  inviteAgain,
  readParticipant,
  readTimeline,
  readTrends,
  withdrawParticipant,
} from './participant';
import { recordConsent, recordScreening, recordTraining, recordWatchedSession } from './readiness';
import { listDevices, addDevice, assignDevice, changeDeviceState, listSupplies, giveSupply } from './device';
import {
  writePrescription,
  readPrescription,
  listPrescriptions,
  signPrescription,
  acknowledgePrescription,
} from './prescription';
import { readCourse, pauseCourse, rescheduleSession } from './course';
import { readClearance, answerPrecheck } from './clearance';
import { issuePermit, readPermit, readPermitKeys, readOwnDevice, sendEvents } from './permit';
import { readSession, writeDiary, listDiary, addPhoto, readPhoto } from './session';
import { readWorklist, claimItem, recordReview, listReviews } from './worklist';
import {
  listCaregivers,
  inviteCaregiver,
  changeShares,
  removeCaregiver,
  readShared,
  readSharedDiary,
  setCaregiverCode,
} from './caregiver';
import { listMessages, sendMessage } from './message';
import { readQualification, runQualification } from './qualification';
import { readAudit, readSiteReport, exportSessions, exportOwn } from './report';

export const doors = {
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
} as const;

export type Doors = typeof doors;
export type DoorName = keyof Doors;
