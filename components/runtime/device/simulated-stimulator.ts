// A stimulator without hardware that behaves like one with: it checks permits itself, ramps by the one set of states that the
// server uses too, measures, watches its own current, keeps its own record, and goes on while no page is open.
// It must not take the app's word for anything but the time it is told and what the wearer does with the pads.

import { millisecondsOf } from '@/shared/values/units';
import { chanceAt, seedOf } from './chance';
import { checkPermit, type PermitCheck, type PermitFinding } from './check-permit';
import { DeviceClock, type Clocks } from './device-clock';
import { RecordKeeper } from './device-record';
import {
  begunBy,
  emptyState,
  freshSession,
  type DeviceStore,
  type KeptSession,
  type KeptState,
  type WhatBegins,
} from './device-state';
import { happen, measureUpTo, stateOf, stopAt, type Surroundings, type Written } from './measure';
import { arePlacedSo, attendPad, contactsOf, liftPad, placePads, type PlacedElectrode } from './pads';
import {
  standAloneOf,
  tryCode,
  withEnd,
  type CodeStart,
  type StandAloneRun,
  type StandAloneSetUp,
} from './stand-alone';
import type {
  DeviceIdentity,
  DeviceRecord,
  DeviceStatus,
  Pairing,
  StartAnswer,
  Stimulator,
  StopWhy,
} from './stimulator';

export interface DeviceParts extends Clocks {
  store: DeviceStore;
  /** Calls again and again until told to stop. */
  every(milliseconds: number, call: () => void): () => void;
  checkPermit?(check: PermitCheck): Promise<PermitFinding>;
  /** mA that a broken output adds; for trying its own watch. */
  faultMilliamp?(seconds: number): number;
}

const firmware = 'SIM 1.2';
const tickMilliseconds = 250;
/** Below this the output would sag before the end. Own choice; the server asks for more (30 %). */
const batteryLeastPercent = 10;
/** A whole session of 2 mA takes about 6 %. Own choice. */
const batteryPercentPerMilliampSecond = 0.0024;
/** It stands on its charger between sessions; after this it is charged. Own choice. */
const chargeAfterMs = 3_600_000;

const nothing = (): Written => ({ entries: [], samples: [] });

export class SimulatedStimulator implements Stimulator {
  private state: KeptState;
  private clock: DeviceClock;
  private readonly keeper: RecordKeeper;
  private stopTicking: (() => void) | null = null;
  private readonly listeners = new Set<() => void>();

  constructor(private readonly parts: DeviceParts) {
    this.state = emptyState(parts.wallMilliseconds());
    this.clock = new DeviceClock(parts, this.state);
    this.keeper = new RecordKeeper(parts.store, () => this.tell());
  }

  private running(): KeptSession | null {
    return this.state.session !== null && this.state.session.endedWhy === null ? this.state.session : null;
  }

  private surroundings(): Surroundings {
    return {
      pads: this.state.pads,
      samples: this.keeper.samples,
      faultMilliamp: this.parts.faultMilliamp ?? (() => 0),
    };
  }

  private tell(): void {
    for (const listener of this.listeners) listener();
  }

  private startTicking(): void {
    this.stopTicking ??= this.parts.every(tickMilliseconds, () => this.tick());
  }

  private tick(): void {
    this.catchUp();
    this.tell();
  }

  /** Lives through the time up to now. What is done to a pad counts from now on, not from the last tick. */
  private catchUp(): void {
    const session = this.running();
    if (session !== null) this.advance(session);
  }

  private keep(written: Written): Promise<void> {
    for (const [, milliamp] of written.samples) {
      const used = Math.abs(milliamp ?? 0) * batteryPercentPerMilliampSecond;
      this.state.batteryPercent = Math.max(0, this.state.batteryPercent - used);
    }
    const { standAlone } = this.state;
    if (standAlone) this.state.standAlone = withEnd(standAlone, written.entries);
    return this.keeper.keep(this.state, written);
  }

  private advance(session: KeptSession): void {
    const uptime = this.clock.settle();
    const written = nothing();
    measureUpTo(session, this.surroundings(), written, uptime - session.startedAtUptime);
    if (session.stopWhy === 'over_current') this.state.isFaulty = true;
    if (session.endedWhy !== null) this.state.pace = 1;
    if (written.entries.length > 0 || written.samples.length > 0) void this.keep(written);
  }

  async open(): Promise<void> {
    const { state, entries, samples } = await this.parts.store.read();
    if (state === undefined) return;
    this.state = state;
    this.clock = new DeviceClock(this.parts, state);
    if (state.session) this.keeper.takeUp(state.session.sessionId, entries, samples);
    const session = this.running();
    if (session === null) return;
    const { rampUpSeconds, holdSeconds, rampDownSeconds } = session.dose;
    // It went on meanwhile, if that time can be believed; else it goes down from where it was.
    if (this.clock.bridge(rampUpSeconds + holdSeconds + rampDownSeconds)) this.tick();
    else this.stop('clock_implausible');
    this.startTicking();
  }

  async pair(pairing: Pairing): Promise<DeviceIdentity> {
    const toldMs = Date.parse(pairing.now);
    if (this.state.pairing?.deviceId !== pairing.deviceId) {
      this.state.highestCounter = 0;
      this.state.newestVersion = null;
      this.state.remembersSinceMs = toldMs;
      this.state.notBeforeMs = 0;
      this.state.chargedAtMs = null;
    }
    const { deviceId, serial, participantId } = pairing;
    this.state.pairing = { deviceId, serial, participantId, keys: [...pairing.keys] };
    this.clock.tellTime(toldMs);
    const chargedAt = this.state.chargedAtMs;
    if (this.running() === null && (chargedAt === null || toldMs - chargedAt > chargeAfterMs)) {
      this.state.batteryPercent = 78 + Math.round(20 * chanceAt(seedOf(pairing.serial), this.state.highestCounter));
      this.state.chargedAtMs = toldMs;
    }
    await this.keep(nothing());
    return this.identityOf(pairing.deviceId, pairing.serial);
  }

  private identityOf(deviceId: string, serial: string): DeviceIdentity {
    return { deviceId, serial, firmware, batteryPercent: Math.floor(this.state.batteryPercent) };
  }

  measureContact(electrodes: readonly PlacedElectrode[]): void {
    if (this.running() !== null) return;
    placePads(this.state, electrodes, this.clock.settle());
    this.startTicking();
    this.tell();
  }

  attend(position: string): void {
    this.catchUp();
    attendPad(this.state, position, this.clock.settle());
    this.tell();
  }

  /** What a wearer can do to a pad and no app can: it comes off. For trying what happens then. */
  lift(position: string): void {
    this.catchUp();
    liftPad(this.state, position);
    this.tell();
  }

  /** What stands in the way of any start, whoever allows it. */
  private obstacle(): 'faulty' | 'session_running' | 'battery_empty' | null {
    if (this.state.isFaulty) return 'faulty';
    if (this.running() !== null) return 'session_running';
    return this.state.batteryPercent < batteryLeastPercent ? 'battery_empty' : null;
  }

  async start(permitToken: string): Promise<StartAnswer> {
    const { pairing } = this.state;
    if (pairing === null) return { started: false, why: 'not_paired' };
    const obstacle = this.obstacle();
    if (obstacle !== null) return { started: false, why: obstacle };
    const finding = await (this.parts.checkPermit ?? checkPermit)({
      token: permitToken,
      keys: pairing.keys,
      deviceId: pairing.deviceId,
      participantId: pairing.participantId,
      nowMs: this.clock.nowMs(),
      highestCounter: this.state.highestCounter,
      newestVersion: this.state.newestVersion ?? null,
    });
    if (!finding.ok) return { started: false, why: finding.why };
    const { claims } = finding;
    if (!arePlacedSo(this.state, claims.montage)) return { started: false, why: 'permit_other_placement' };
    if (!this.isContactGood()) return { started: false, why: 'contact_not_good' };
    // The counter is written before any current flows: whatever happens next, this permit cannot start it twice.
    const { highestCounter, newestVersion } = this.state;
    this.state.highestCounter = claims.counter;
    this.state.newestVersion = { course: claims.course, version: claims.prescriptionVersion };
    this.clock.believeNotBefore(millisecondsOf(claims.iat));
    const isBegun = await this.begin(begunBy(claims), seedOf(claims.jti), claims.counter);
    if (isBegun) return { started: true };
    Object.assign(this.state, { highestCounter, newestVersion });
    return { started: false, why: 'record_unwritable' };
  }

  /** False when its record could not be written: then nothing has begun. */
  private async begin(what: WhatBegins, seed: number, counter: number): Promise<boolean> {
    const before = this.state.session;
    this.state.session = freshSession(what, seed, this.clock.settle());
    this.keeper.takeUp(what.sessionId, [], []);
    await this.keep({ entries: [{ index: 0, atSeconds: 0, kind: 'started', counter }], samples: [] });
    if (!this.keeper.isKept) {
      this.state.session = before;
      return false;
    }
    this.startTicking();
    this.tick();
    return true;
  }

  /** Staff make it one without a radio: from then on it takes codes, and no permit. False for what may not be set. */
  async setUpStandAlone(setUp: StandAloneSetUp): Promise<boolean> {
    const standAlone = standAloneOf(setUp);
    if (standAlone === null || this.running() !== null) return false;
    this.state.standAlone = standAlone;
    this.state.pairing = null;
    this.state.batteryPercent = 100;
    await this.keep(nothing());
    return this.keeper.isKept;
  }

  /** A code typed on its keys. Each wrong one is written before it is answered: a battery taken out gives no further tries. */
  async startByCode(typed: string): Promise<CodeStart> {
    const { standAlone } = this.state;
    if (!standAlone) return { started: false, why: 'not_set_up' };
    const obstacle = this.obstacle();
    if (obstacle !== null) return { started: false, why: obstacle };
    // Before the code, so that a pad that has come loose uses none up.
    if (!arePlacedSo(this.state, standAlone.electrodes)) return { started: false, why: 'permit_other_placement' };
    if (!this.isContactGood()) return { started: false, why: 'contact_not_good' };
    const tried = tryCode(standAlone, typed, this.clock.settle());
    this.state.standAlone = tried.state;
    if ('refused' in tried) {
      await this.keep(nothing());
      return this.keeper.isKept ? tried.refused : { started: false, why: 'record_unwritable' };
    }
    const { begins, counter } = tried;
    const isBegun = await this.begin(begins, seedOf(begins.sessionId), counter);
    if (isBegun) return { started: true, counter };
    this.state.standAlone = standAlone;
    return { started: false, why: 'record_unwritable' };
  }

  /** Its own record since staff set it up, for the read-out. */
  runs(): readonly StandAloneRun[] {
    return this.state.standAlone?.runs ?? [];
  }

  /** Something that happens to the running session now. */
  private act(happening: (session: KeptSession, written: Written, seconds: number) => void): void {
    const session = this.running();
    if (session === null) return;
    this.advance(session);
    if (session.endedWhy !== null) return;
    const written = nothing();
    happening(session, written, this.clock.uptime() - session.startedAtUptime);
    void this.keep(written);
    this.tell();
  }

  pause(): void {
    this.act((session, written, seconds) => {
      const now = stateOf(session, seconds);
      if (now.state === 'ended' || now.pausedBy === 'person' || session.stopWhy !== null) return;
      happen(session, this.surroundings(), written, seconds, 'pause');
    });
  }

  resume(): boolean {
    if (!this.isContactGood()) return false;
    this.act((session, written, seconds) => happen(session, this.surroundings(), written, seconds, 'resume'));
    return true;
  }

  stop(why: StopWhy): void {
    this.act((session, written, seconds) => stopAt(session, this.surroundings(), written, seconds, why));
  }

  private isContactGood(): boolean {
    return contactsOf(this.state, this.clock.uptime()).every((contact) => contact.grade === 'good');
  }

  private sessionSeconds(session: KeptSession): number {
    return session.endedAtSeconds ?? this.clock.uptime() - session.startedAtUptime;
  }

  status(): DeviceStatus {
    const { pairing, session } = this.state;
    const seconds = session === null ? 0 : this.sessionSeconds(session);
    return {
      identity: pairing === null ? null : this.identityOf(pairing.deviceId, pairing.serial),
      contacts: contactsOf(this.state, this.clock.uptime()),
      session: session && {
        sessionId: session.sessionId,
        permitId: session.permitId,
        dose: session.dose,
        seconds,
        snapshot: stateOf(session, seconds),
        events: [...session.events],
        stopWhy: session.stopWhy,
        endedWhy: session.endedWhy,
      },
      remembersSinceMs: this.state.remembersSinceMs,
      recordIsKept: this.keeper.isKept,
      isFaulty: this.state.isFaulty,
    };
  }

  record(sessionId: string, from: { entry: number; sample: number }): DeviceRecord {
    return this.keeper.read(sessionId, from);
  }

  subscribe(listener: () => void): () => void {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  }

  close(): void {
    this.stopTicking?.();
    this.stopTicking = null;
    this.listeners.clear();
    this.keeper.close();
  }

  /** A demo's own: time that runs faster until the session ends. */
  setPace(pace: number): void {
    const session = this.running();
    if (session === null) return;
    this.advance(session);
    this.clock.setPace(pace);
    void this.keep(nothing());
    this.tell();
  }

  pace(): number {
    return this.state.pace;
  }

  /** How far its time is ahead of real time in this session. */
  secondsAhead(): number {
    const { session } = this.state;
    if (session === null) return 0;
    const unsettled = session.endedWhy === null ? this.clock.realSecondsSinceSettled() : 0;
    return Math.max(0, this.sessionSeconds(session) - session.realSeconds - unsettled);
  }
}
