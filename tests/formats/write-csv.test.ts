import { describe, expect, it } from "vitest";
import { csvText, type Cell } from "@/formats/csv/write-csv";

async function written(header: string[], rows: Cell[][]): Promise<string> {
  let text = "";
  for await (const part of csvText(header, rows)) text += part;
  return text;
}

describe("csvText", () => {
  it("quotes what needs it and leaves missing values empty", async () => {
    expect(await written(["name", "delay_s"], [['Mill "Lane", west', 12.5], ["two\nlines", NaN], ["x", null]])).toBe(
      'name,delay_s\n"Mill ""Lane"", west",12.5\n"two\nlines",\nx,\n',
    );
  });

  it("disarms text that a spreadsheet would run", async () => {
    expect(await written(["a", "b"], [["=1+1", -1], ["@x", 2], ["-2+3", 3], ["+cmd", 4]])).toBe("a,b\n'=1+1,-1\n'@x,2\n'-2+3,3\n'+cmd,4\n");
  });

  it("leaves text that is a plain number as it is: identifiers must be found again", async () => {
    expect(await written(["junction_id", "b"], [["-2", -1], ["+4.5", 2], ["-17", 3]])).toBe("junction_id,b\n-2,-1\n+4.5,2\n-17,3\n");
  });

  it("writes long lists in parts", async () => {
    const text = await written(["n"], Array.from({ length: 1201 }, (_, i) => [i]));
    expect(text.trimEnd().split("\n")).toHaveLength(1202);
  });
});
