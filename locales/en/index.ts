/**
 * All English words that the client may load, by namespace. It must not hold `mail`, whose words only the server sends.
 */
import audit from './audit.json';
import caregiver from './caregiver.json';
import clearance from './clearance.json';
import common from './common.json';
import course from './course.json';
import device from './device.json';
import diary from './diary.json';
import errors from './errors.json';
import forms from './forms.json';
import messages from './messages.json';
import participant from './participant.json';
import participants from './participants.json';
import precheck from './precheck.json';
import prescription from './prescription.json';
import protocol from './protocol.json';
import publicWords from './public.json';
import qualification from './qualification.json';
import review from './review.json';
import sessions from './sessions.json';
import equipment from './equipment.json';
import report from './report.json';
import session from './session.json';
import site from './site.json';
import staff from './staff.json';
import worklist from './worklist.json';

export const en = {
  audit,
  caregiver,
  clearance,
  common,
  course,
  device,
  diary,
  errors,
  forms,
  messages,
  participant,
  participants,
  precheck,
  prescription,
  protocol,
  public: publicWords,
  qualification,
  review,
  sessions,
  equipment,
  report,
  session,
  site,
  staff,
  worklist,
};
