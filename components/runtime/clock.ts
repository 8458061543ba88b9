// The browser's two clocks, and the only place that reads them. A session is timed by the monotonic one; the wall clock is for
// showing, and for bounding the gap over a reload. It decides nothing: the server's clock does.

/** Seconds since this page was opened; never jumps. */
export function monotonicSeconds(): number {
  return performance.now() / 1000;
}

/** Milliseconds since 1970 by the device's own clock, which its owner may have set to anything. */
export function wallMilliseconds(): number {
  return Date.now();
}
