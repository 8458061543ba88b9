// Permission for notices on this phone, through the platform's own means. It sends nothing: what is sent is the server's.

import * as Notifications from 'expo-notifications';

export type NoticeState = 'allowed' | 'not_asked' | 'forbidden' | 'not_here';

function stateOf(answer: { granted: boolean; canAskAgain: boolean }): NoticeState {
  if (answer.granted) return 'allowed';
  return answer.canAskAgain ? 'not_asked' : 'forbidden';
}

/** What this phone says about notices; `not_here` where it knows none. */
export async function noticesAllowed(): Promise<NoticeState> {
  try {
    return stateOf(await Notifications.getPermissionsAsync());
  } catch {
    return 'not_here';
  }
}

/** Asks the person, through the platform's own question. */
export async function askForNotices(): Promise<NoticeState> {
  try {
    return stateOf(await Notifications.requestPermissionsAsync());
  } catch {
    return 'not_here';
  }
}
