// What: how long one walk in the browser may take before it counts as hung: it starts a server and goes through many pages, on a
// machine that may be doing other things.
jest.setTimeout(900_000);
