// A demo's faster time: keeps the server's clock level with the stimulator's before anything is sent. Exists for demos only, where
// `/api/me` says so; a real session has no speed.

import { moveDemoClock } from '@/shared/contracts/house';
import { callDoor } from './api';

export const demoSpeeds = [1, 10, 60] as const;
export type DemoSpeed = (typeof demoSpeeds)[number];

/**
 * Moves the server's clock by the whole seconds that it has not been told yet. Gives back how many have been told in all.
 */
export async function bringClockAlong(secondsAhead: number, secondsTold: number): Promise<number> {
  const untold = Math.floor(secondsAhead) - secondsTold;
  if (untold < 1) return secondsTold;
  await callDoor(moveDemoClock, { body: { advanceSeconds: untold } });
  return secondsTold + untold;
}
