// A skin photo of a session: read by its content, turned upright, made small, written anew as JPEG without anything it carried along.

import { lockCourse } from '@/db/queries/course-state';
import { countPhotos, findPhotoConsent, insertPhoto } from '@/db/queries/photo';
import { findSession } from '@/db/queries/session';
import { action, notFound, refuse } from '@/server/action';
import { readPicture } from '@/server/features/photo/read-picture';
import { addPhoto as contract } from '@/shared/contracts/session';
import { photoLimits } from '@/shared/rules/house-limits';

export const addPhoto = action(contract, async ({ actor, params, file }, tx) => {
  const session = await findSession(tx.db, params.sessionId);
  if (!session || session.participantId !== actor.participantId) return notFound();
  const { participantId, siteId } = session;
  const whose = { participantId, siteId };
  if (session.startedAt === null) return refuse('session.not_ended', whose);
  if (!(await findPhotoConsent(tx.db, participantId))) return refuse('photo.no_consent', whose);
  // Before the lock: making it small takes a while.
  const picture = await readPicture(file);
  if (!picture.isReadable) return refuse(picture.code, { ...whose, status: picture.status });
  await lockCourse(tx.db, session.courseId);
  const now = await tx.now();
  if ((await countPhotos(tx.db, session.id)) >= photoLimits.mostPerSession) return refuse('photo.too_many', whose);

  const { jpeg, width, height } = picture;
  const id = crypto.randomUUID();
  await insertPhoto(tx.db, {
    ...{ id, participantId, jpeg, width, height },
    sessionId: session.id,
    createdAt: now,
    accountId: actor.accountId,
  });
  tx.record({
    ...whose,
    subject: { kind: 'photo', id },
    after: { sessionId: session.id, width, height, bytes: jpeg.length },
  });
  return { id, takenAt: now, width, height };
});
