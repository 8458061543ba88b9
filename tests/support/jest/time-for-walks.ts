// What: how long one walk in the browser may take before it counts as hung: it starts a server and goes through many pages.
jest.setTimeout(240_000);
