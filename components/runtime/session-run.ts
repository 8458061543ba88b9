// The run of one session on this phone: asks the stimulator, copies its record into the log, sends, and acts on what the server says.
// It must not decide what current flows (the stimulator does, by the permit) or what was delivered (the server does).

import type { AnswerOf } from '@/shared/contracts/contract';
import type { PermitView, SessionEvent, sendEvents } from '@/shared/contracts/permit';
import type { RedFlag } from '@/shared/values/codes';
import { sensationStopsRun } from '@/shared/rules/pad-pain';
import { bringClockAlong, type DemoSpeed } from './demo-speed';
import type { SimulatedStimulator } from './device/simulated-stimulator';
import type { DeviceIdentity, DeviceStatus, StartAnswer } from './device/stimulator';
import { logEvents, type EventDraft, type RunChange } from './event-log';
import { contactEvents, entryEvents, freshRun, openingEvents } from './run-events';
import { findRun, type Advice, type RunRow } from './phone-store';
import { keepMe } from './kept-me';
import type { Claim } from './one-page';
import { realParts, type RunParts } from './run-parts';
import { setRunningHere } from './running-here';
import type { UnsentSender } from './unsent-sender';

export interface RunView {
  /**
   * unknown: not looked yet · unkept: this browser lets nothing be kept, so nothing may start · elsewhere: another window of this
   * browser has the stimulator
   */
  phase: 'unknown' | 'unkept' | 'elsewhere' | 'none' | 'running' | 'ended';
  run: RunRow | null;
  device: DeviceStatus | null;
  speed: number;
}
/** Samples go out this often; at the end at once. By real time, so that a faster demo sends no more often. */
const samplesEverySeconds = 5;

const nothingYet: RunView = { phase: 'unknown', run: null, device: null, speed: 1 };

export class SessionRun {
  private view = nothingYet;
  private device: SimulatedStimulator | null = null;
  private opening: Promise<void> | null = null;
  private copying: Promise<void> = Promise.resolve();
  private samplesLoggedAt = 0;
  /** Said by the person and not in the log yet; kept until it is. */
  private felt: EventDraft[] = [];
  private advice: Advice | null = null;
  private leaving: (() => void)[] = [];
  private readonly listeners = new Set<() => void>();
  private readonly sender: UnsentSender;

  constructor(
    private readonly accountId: string,
    private readonly parts: RunParts,
  ) {
    this.sender = parts.sender(accountId);
  }

  read = (): RunView => this.view;

  subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  private show(change: Partial<RunView> = {}): void {
    const device = this.device?.status() ?? null;
    this.view = { ...this.view, device, speed: this.device?.pace() ?? 1, ...change };
    setRunningHere(this.view.phase === 'running');
    for (const listener of this.listeners) listener();
  }

  /** Finds the stimulator and, if one runs, the session. Asked any number of times it does so once. */
  open(claim: Claim = 'take'): Promise<void> {
    if (this.view.phase === 'elsewhere' && claim === 'take') this.opening = null;
    this.opening ??= this.takeUp(claim).catch(() => {
      this.opening = null;
      this.show({ phase: 'unkept' });
    });
    return this.opening;
  }

  private async takeUp(claim: Claim): Promise<void> {
    if (!(await this.parts.claim(this.accountId, claim, () => this.lose()))) return this.show({ phase: 'elsewhere' });
    const store = await this.parts.store(this.accountId);
    const run = await findRun(store);
    const device = await this.parts.stimulator(this.accountId);
    await device.open();
    this.device = device;
    this.leaving = [
      device.subscribe(() => this.onDevice()),
      this.sender.onAnswer((permitId, answer) => this.onAnswer(permitId, answer)),
    ];
    this.sender.beforeSending = () => this.bringDemoClock();
    this.sender.afterAll = () => {
      if (this.view.phase !== 'running') void keepMe(null);
    };
    if (run === null || run.phase === 'ended') return this.show({ phase: run === null ? 'none' : 'ended', run });
    // Written before the stimulator was asked: if it never began, the permit is still there to be tried again.
    if (device.status().session?.permitId !== run.permitId) return this.show({ phase: 'none' });
    this.show({ phase: 'running', run });
    if (run.phase === 'starting') await this.write([], { phase: 'running' });
    this.onDevice();
  }

  /** Another window has taken the stimulator: this one must not touch it any more. */
  private lose(): void {
    for (const leave of this.leaving) leave();
    this.leaving = [];
    this.sender.beforeSending = null;
    this.device?.close();
    this.device = null;
    this.show({ phase: 'elsewhere' });
  }

  stimulator(): SimulatedStimulator | null {
    return this.device;
  }

  /**
   * Begins a session on a permit. The run, who was asked and how contact was are on record before any current flows.
   */
  async begin(permit: PermitView, site: RunRow['site'], identity: DeviceIdentity): Promise<StartAnswer> {
    await this.open();
    const device = this.device;
    if (device === null) return { started: false, why: 'record_unwritable' };
    const run = freshRun(permit, site);
    try {
      const store = await this.parts.store(this.accountId);
      const known = await store.run(permit.id);
      await store.forgetOtherRuns(permit.id);
      if (known === undefined) await store.addRun(run);
      const contacts = device.status().contacts;
      await logEvents(
        store,
        permit.id,
        known === undefined ? openingEvents(identity, contacts) : contactEvents(contacts),
      );
    } catch {
      return { started: false, why: 'record_unwritable' };
    }
    const answer = await device.start(permit.token);
    if (answer.started) await this.write([], { phase: 'running' }, permit.id);
    this.sender.now();
    return answer;
  }

  pause(): void {
    this.device?.pause();
  }

  resume(): boolean {
    return this.device?.resume() ?? false;
  }

  /**
   * The stimulator first, always: no record, network or store stands before it. Where this page does not have the stimulator (yet), it
   * gets it and stops then.
   */
  stop(): void {
    if (this.device) return this.device.stop('button');
    void this.open('take').then(() => this.device?.stop('button'));
  }

  /** Something is felt. Strong pain at a pad stops the run. True if it did. */
  feel(sensation: string, strength: number): boolean {
    const mustStop = sensationStopsRun(sensation, strength);
    if (mustStop) this.device?.stop('pain_high');
    this.note({ kind: 'sensation', atSeconds: this.secondsNow(), sensation, strength }, mustStop ? 'pain_high' : null);
    return mustStop;
  }

  /** Something serious happened: down at once, advice on the screen. */
  raise(flag: RedFlag): void {
    this.device?.stop('red_flag');
    this.note({ kind: 'red_flag', atSeconds: this.secondsNow(), flag }, flag);
  }

  /** On the screen before anything is written. */
  private note(event: EventDraft, advice: Advice | null): void {
    this.felt.push(event);
    const { run } = this.view;
    if (advice !== null) this.advice = advice;
    if (run && advice !== null) this.show({ run: { ...run, advice } });
    this.onDevice();
  }

  private secondsNow(): number {
    return Math.round((this.device?.status().session?.seconds ?? 0) * 1000) / 1000;
  }

  setSpeed(speed: DemoSpeed): void {
    this.device?.setPace(speed);
  }

  /**
   * The stimulator's own record that it never began on a permit that is over: without it the dose stays reserved. Null when this is not the
   * permit's stimulator, when it did begin, or when its memory does not reach back to the permit: a wiped record proves nothing.
   */
  async unusedEvent(permit: Pick<PermitView, 'id' | 'deviceId' | 'issuedAt'>): Promise<SessionEvent | null> {
    await this.open('if_free');
    const status = this.device?.status();
    if (!status || status.identity?.deviceId !== permit.deviceId || status.session?.permitId === permit.id) return null;
    if (status.remembersSinceMs === null || status.remembersSinceMs > Date.parse(permit.issuedAt)) return null;
    const run = await (await this.parts.store(this.accountId)).run(permit.id);
    // After whatever was logged on the way to a start that did not come.
    const sequence = run?.nextSequence ?? 0;
    const nothing = { atSeconds: 0, onSeconds: 0, chargeCoulomb: 0 };
    return {
      id: crypto.randomUUID(),
      sequence,
      kind: 'ended',
      reason: 'permit_void',
      ...nothing,
      lastSequence: sequence,
    };
  }

  /** The person has seen the end and gone on to the diary. */
  async leave(): Promise<void> {
    const { run } = this.view;
    if (run?.phase !== 'ended') return;
    await (await this.parts.store(this.accountId)).forgetRun(run.permitId);
    this.show({ phase: 'none', run: null });
  }

  // ── from the stimulator into the log ──

  private onDevice(): void {
    this.show();
    if (this.view.phase !== 'running') return;
    const copy = () => this.copyRecord();
    this.copying = this.copying.then(copy, copy);
  }

  private async copyRecord(): Promise<void> {
    const { run, phase } = this.view;
    if (run === null || phase !== 'running' || this.device === null) return;
    const { entries, samples } = this.device.record(run.sessionId, {
      entry: run.entriesTaken,
      sample: run.samplesTaken,
    });
    const ended = entries.find((entry) => entry.kind === 'ended');
    const isDue = ended !== undefined || this.parts.monotonicSeconds() - this.samplesLoggedAt >= samplesEverySeconds;
    const taken = isDue ? samples : [];
    const felt = [...this.felt];
    if (entries.length + taken.length + felt.length === 0) return;
    const drafts = [...felt, ...entryEvents(entries, taken, this.device.status().contacts)];
    await this.write(drafts, {
      entriesTaken: run.entriesTaken + entries.length,
      samplesTaken: run.samplesTaken + taken.length,
      ...(this.advice === null ? {} : { advice: this.advice }),
      ...(ended === undefined ? {} : { phase: 'ended' }),
    });
    this.felt = this.felt.slice(felt.length);
    if (isDue) this.samplesLoggedAt = this.parts.monotonicSeconds();
    this.sender.now();
  }

  private async write(
    drafts: readonly EventDraft[],
    change: RunChange,
    permitId = this.view.run?.permitId,
  ): Promise<void> {
    if (permitId === undefined) return;
    const store = await this.parts.store(this.accountId);
    const run = await logEvents(store, permitId, drafts, change);
    if (run === null) return;
    this.show({ run, phase: run.phase === 'starting' ? this.view.phase : run.phase });
  }

  // ── from the server ──

  private onAnswer(permitId: string, answer: AnswerOf<typeof sendEvents>): void {
    const { run } = this.view;
    if (run?.permitId === permitId && answer.permit.rampDown) this.device?.stop('permit_void');
  }

  private async bringDemoClock(): Promise<void> {
    const { run } = this.view;
    if (run === null || this.device === null || this.device.secondsAhead() < 1) return;
    const demoSecondsTold = await bringClockAlong(this.device.secondsAhead(), run.demoSecondsTold);
    if (demoSecondsTold !== run.demoSecondsTold) await this.write([], { demoSecondsTold });
  }
}

const runs = new Map<string, SessionRun>();

/** The one run of an account in this page. */
export function sessionRunOf(accountId: string): SessionRun {
  let run = runs.get(accountId);
  if (!run) {
    run = new SessionRun(accountId, realParts);
    runs.set(accountId, run);
  }
  return run;
}
