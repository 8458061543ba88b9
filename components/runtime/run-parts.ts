// What a session's run is built of in a browser: this account's stimulator, store and sender, and the page's clock. Tests bring their own.

import { monotonicSeconds, wallMilliseconds } from './clock';
import { openDeviceStore } from './device/device-state';
import { SimulatedStimulator } from './device/simulated-stimulator';
import { claimStimulator, type Claim } from './one-page';
import { phoneStore, type PhoneStore } from './phone-store';
import { senderOf, type UnsentSender } from './unsent-sender';

export interface RunParts {
  stimulator(accountId: string): Promise<SimulatedStimulator>;
  store(accountId: string): Promise<PhoneStore>;
  sender(accountId: string): UnsentSender;
  claim(accountId: string, claim: Claim, onLost: () => void): Promise<boolean>;
  monotonicSeconds(): number;
}

export const realParts: RunParts = {
  stimulator: async (accountId) =>
    new SimulatedStimulator({
      monotonicSeconds,
      wallMilliseconds,
      store: await openDeviceStore(accountId),
      every: (milliseconds, call) => {
        const timer = setInterval(call, milliseconds);
        return () => clearInterval(timer);
      },
    }),
  store: phoneStore,
  sender: senderOf,
  claim: claimStimulator,
  monotonicSeconds,
};
