// Skin photos on a real database: read by their content, written anew without what they carried, shown only to those allowed.

import { randomUUID } from 'node:crypto';
import sharp from 'sharp';
import { z } from 'zod';
import type { AccountActor } from '@/server/action';
import { recordConsent } from '@/server/features/consent/record-consent';
import { addPhoto } from '@/server/features/photo/add-photo';
import { readPhoto } from '@/server/features/photo/read-photo';
import type { PermitView } from '@/shared/contracts/permit';
import { type Clinic, type Patient } from '../support/clinic';
import { consentForm } from '../support/records';
import { permitFor, readyPatient, runSession, openMorning } from '../support/running';

let clinic: Clinic;
let siteId: string;
let oona: AccountActor;
let patient: Patient;
let permit: PermitView;

beforeAll(async () => {
  ({ clinic, siteId, oona } = await openMorning());
  const ready = await readyPatient(clinic, oona, siteId);
  patient = ready.patient;
  permit = await runSession(clinic, ready);
});
afterAll(() => clinic.close());

const red = { r: 180, g: 60, b: 50 };
const picture = (width: number, height: number) => sharp({ create: { width, height, channels: 3, background: red } });

const add = (bytes: Uint8Array, who: AccountActor = patient, sessionId = permit.sessionId) =>
  clinic.transact.run(addPhoto, {
    actor: who,
    params: { sessionId },
    query: undefined,
    body: { consent: 'true' },
    key: null,
    file: { bytes, claimedType: 'image/jpeg' },
    requestId: randomUUID(),
  });
const added = async (bytes: Uint8Array) => {
  const { answer, refusal } = await add(bytes);
  if (refusal) throw new Error(refusal.code);
  return addPhoto.contract.answer.parse(answer);
};
const refusalOf = async (...given: Parameters<typeof add>) => {
  const { refusal } = await add(...given);
  return [refusal?.status, refusal?.code];
};

it('makes a large photo small, turns it upright, and keeps nothing that it carried', async () => {
  const bytes = await picture(3000, 1000)
    .withExif({ IFD0: { Artist: 'Ines Marlow' }, IFD3: { GPSLatitude: '51/1 30/1 0/1' } })
    .withMetadata({ orientation: 6 })
    .jpeg()
    .toBuffer();
  expect((await sharp(bytes).metadata()).exif).toBeDefined();
  const photo = await added(bytes);
  expect([photo.width, photo.height]).toEqual([533, 1600]);
  const { type, bytes: kept } = await clinic.call(patient, readPhoto, { params: { photoId: photo.id } });
  expect(type).toBe('image/jpeg');
  const { format, exif, orientation, width } = await sharp(kept).metadata();
  expect([format, exif, orientation, width]).toEqual(['jpeg', undefined, undefined, 533]);
  expect(Buffer.from(kept).includes('Marlow')).toBe(false);
});

it('takes PNG and WebP, and gives them out as JPEG', async () => {
  for (const bytes of [await picture(40, 30).png().toBuffer(), await picture(40, 30).webp().toBuffer()]) {
    const { id } = await added(bytes);
    const { bytes: kept } = await clinic.call(patient, readPhoto, { params: { photoId: id } });
    expect((await sharp(kept).metadata()).format).toBe('jpeg');
  }
});

it('refuses by content whatever the file says of itself', async () => {
  expect(await refusalOf(Buffer.from('<svg xmlns="http://www.w3.org/2000/svg" width="9" height="9"/>'))).toEqual([
    415,
    'photo.type_not_allowed',
  ]);
  expect(await refusalOf(await picture(9, 9).gif().toBuffer())).toEqual([415, 'photo.type_not_allowed']);
  expect(await refusalOf(Buffer.from('%PDF-1.7'))).toEqual([415, 'photo.type_not_allowed']);
  expect(await refusalOf(new Uint8Array())).toEqual([415, 'photo.type_not_allowed']);
});

it('refuses a picture that is cut off, and one of too many pixels', async () => {
  const whole = await picture(400, 400).jpeg().toBuffer();
  expect(await refusalOf(whole.subarray(0, whole.length - 200))).toEqual([415, 'photo.unreadable']);
  expect(await refusalOf(await picture(9000, 5000).png({ compressionLevel: 9 }).toBuffer())).toEqual([
    413,
    'photo.too_large',
  ]);
});

it('takes at most five of one session', async () => {
  const small = await picture(9, 9).png().toBuffer();
  const [kept] = await clinic.rows({ n: z.number() }, `select count(*)::int n from photo where session_id = $1`, [
    permit.sessionId,
  ]);
  for (let more = kept?.n ?? 0; more < 5; more += 1) await added(small);
  expect(await refusalOf(small)).toEqual([409, 'photo.too_many']);
});

it('is for the participant and the clinic’s staff alone, and every look is on record', async () => {
  const [photo] = await clinic.rows({ id: z.string() }, `select id from photo limit 1`);
  const photoId = photo?.id ?? '';
  await clinic.call(oona, readPhoto, { params: { photoId } });
  const [looks] = await clinic.rows(
    { n: z.number() },
    `select count(*)::int n from audit_entry where action = 'photo.read' and kind = 'read' and actor_id = $1`,
    [oona.accountId],
  );
  expect(looks?.n).toBe(1);
  const other = await clinic.patient('Somebody Else', siteId);
  const stranger = await clinic.staff('Odd Man', 'clinician', await clinic.site('MR'));
  for (const who of [other, stranger])
    expect(await clinic.refused(who, readPhoto, { params: { photoId } })).toMatchObject({ status: 404 });
  expect(await refusalOf(await picture(9, 9).png().toBuffer(), other)).toEqual([404, 'not_found']);
});

it('refuses a photo of a session that has not begun', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const { sessionId } = await permitFor(clinic, ready);
  expect(await refusalOf(await picture(9, 9).png().toBuffer(), ready.patient, sessionId)).toEqual([
    409,
    'session.not_ended',
  ]);
});

it('keeps no photo of somebody whose consent does not agree to photos', async () => {
  const ready = await readyPatient(clinic, oona, siteId);
  const body = { ...consentForm, agreesToPhotos: false };
  await clinic.call(oona, recordConsent, { params: { participantId: ready.patient.participantId }, body });
  const { sessionId } = await runSession(clinic, ready);
  const small = await picture(9, 9).png().toBuffer();
  expect(await refusalOf(small, ready.patient, sessionId)).toEqual([409, 'photo.no_consent']);
});
