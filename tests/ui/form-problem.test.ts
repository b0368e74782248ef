import { expect, it } from "vitest";
import { problemSentence } from "@/ui/forms/form-problem";

it("a person is not told the names of fields in requests", () => {
  expect(problemSentence("Check repeated: The two passwords differ.")).toBe("The two passwords differ.");
  expect(problemSentence("Check periods.am.toMin: The window must end after it begins.")).toBe("The window must end after it begins.");
  expect(problemSentence("Sign in first.")).toBe("Sign in first.");
});
