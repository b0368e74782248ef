import type { ScreenResult } from "@/domain/screen";
import { counted } from "@/ui/format";
import { CAUTIONS } from "@/ui/primitives/caution";

const WORDS = [
  ["Time lost", "How much longer a vehicle takes through the junction than it would without signals and traffic, on average."],
  ["Grade", "A letter from A (up to 10 seconds) to F (more than 80 seconds), by the Highway Capacity Manual."],
  ["Rank, with two numbers under it", "The place in the list of the whole city, and the places it could as well have, given how many vehicles were seen."],
  ["Queue", "How far back from the stop line vehicles were seen to stand; one time in twenty it is longer."],
  ["Evidence", "How far the vehicles that were seen support the figure: strong, fair or thin."],
] as const;

/** What a reader needs to understand the list, and what it must not be taken for. */
export function ReportNotes({ basis, locale }: { basis: ScreenResult["basis"]; locale: string }) {
  return (
    <div className="grid gap-8 border-t border-ink bg-paper px-4 py-6 sm:px-6 lg:grid-cols-2">
      <section>
        <h2 className="mb-2 text-lg">What the words mean</h2>
        <dl className="max-w-prose text-[0.95rem]">
          {WORDS.map(([word, meaning]) => (
            <div key={word} className="mb-1.5">
              <dt className="inline font-semibold">{word}: </dt>
              <dd className="inline text-ink-soft">{meaning}</dd>
            </div>
          ))}
        </dl>
      </section>
      <section>
        <h2 className="mb-2 text-lg">How far it can be trusted</h2>
        <ul className="max-w-prose list-disc pl-5 text-[0.95rem] text-ink-soft">
          <li>
            It rests on {counted(basis.traversals, "passage", "passages", locale)} of vehicles on {counted(basis.days, "day", "days", locale)}, a sample of all traffic (method version {basis.methodVersion}).
          </li>
          {CAUTIONS.map((caution) => (
            <li key={caution}>{caution}</li>
          ))}
        </ul>
      </section>
    </div>
  );
}
