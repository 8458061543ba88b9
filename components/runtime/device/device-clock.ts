// The simulated stimulator's own time: seconds since it was switched on, from the page's monotonic clock, and the day's time as it
// was last told. Changing the phone's clock changes neither while the page is open.

import type { KeptState } from './device-state';

export interface Clocks {
  monotonicSeconds(): number;
  wallMilliseconds(): number;
}

/** A clock set by the network may step this far back without meaning anything. Own choice. */
const wallToleranceSeconds = 2;

export class DeviceClock {
  private base: { monotonic: number; uptime: number };
  private told: { ms: number; monotonic: number } | null = null;

  constructor(
    private readonly clocks: Clocks,
    private state: KeptState,
  ) {
    this.base = { monotonic: clocks.monotonicSeconds(), uptime: state.uptimeSeconds };
  }

  uptime(): number {
    return this.base.uptime + this.realSecondsSinceSettled() * this.state.pace;
  }

  realSecondsSinceSettled(): number {
    return this.clocks.monotonicSeconds() - this.base.monotonic;
  }

  /** Brings the kept times up to now; whatever changes the pace or is written goes through here. */
  settle(): number {
    const uptime = this.uptime();
    const { session } = this.state;
    if (session !== null && session.endedWhy === null) session.realSeconds += this.realSecondsSinceSettled();
    this.base = { monotonic: this.clocks.monotonicSeconds(), uptime };
    this.state.uptimeSeconds = uptime;
    this.state.wallMs = this.clocks.wallMilliseconds();
    return uptime;
  }

  setPace(pace: number): void {
    this.settle();
    this.state.pace = pace;
  }

  /**
   * After a time without a page. True if it could be lived through as the phone's clock says; false if that went backwards or
   * claims more than `longestSeconds`: then no time is counted.
   */
  bridge(longestSeconds: number): boolean {
    const gapSeconds = (this.clocks.wallMilliseconds() - this.state.wallMs) / 1000;
    if (gapSeconds < -wallToleranceSeconds || gapSeconds > longestSeconds) return false;
    const passed = Math.max(0, gapSeconds);
    const { session } = this.state;
    if (session !== null && session.endedWhy === null) session.realSeconds += passed;
    this.base.uptime += passed * this.state.pace;
    return true;
  }

  tellTime(nowMs: number): void {
    this.told = { ms: nowMs, monotonic: this.clocks.monotonicSeconds() };
    this.state.clockAheadMs = nowMs - this.clocks.wallMilliseconds();
    this.believeNotBefore(nowMs);
  }

  believeNotBefore(ms: number): void {
    this.state.notBeforeMs = Math.max(this.state.notBeforeMs, ms);
  }

  nowMs(): number {
    const sinceTold =
      this.told === null ? null : this.told.ms + (this.clocks.monotonicSeconds() - this.told.monotonic) * 1000;
    return Math.max(this.state.notBeforeMs, sinceTold ?? this.clocks.wallMilliseconds() + this.state.clockAheadMs);
  }
}
