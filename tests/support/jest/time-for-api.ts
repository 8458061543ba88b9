// What: how long one api test may take before it counts as hung. Passwords are hashed slowly on purpose (100 ms each).
jest.setTimeout(30_000);
