import { afterEach, beforeEach, expect, vi, type MockInstance } from "vitest";

let errors: MockInstance<typeof console.error>;
let areExpected = false;

beforeEach(() => {
  areExpected = false;
  errors = vi.spyOn(console, "error");
});

afterEach(() => {
  const calls = errors.mock.calls;
  errors.mockRestore();
  if (!areExpected) expect(calls, "an error was logged that the test did not expect").toEqual([]);
});

/** For a test whose subject logs an error on purpose: keeps the log quiet and answers what was logged. */
export function expectLoggedErrors(): unknown[][] {
  areExpected = true;
  errors.mockImplementation(() => undefined);
  return errors.mock.calls;
}
