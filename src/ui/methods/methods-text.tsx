import type { ReactNode } from "react";
import { METHOD_VERSION } from "@/core/method-version";
import { CAUTIONS } from "@/ui/primitives/caution";
import { MAIN_SAMPLINGS } from "./accuracy";
import { DEFINITIONS, type Definition, NO_EVIDENCE_RULE } from "./definitions";
import { AccuracyTable, EvidenceTable, IntervalTable, LosTable } from "./methods-tables";

export function MethodsText() {
  return (
    <div className="flex max-w-4xl flex-col gap-10 px-4 py-7 sm:px-6">
      <Section id="figures" title="What the figures mean">
        <dl className="flex flex-col">
          {DEFINITIONS.map((definition) => (
            <DefinitionEntry key={definition.id} definition={definition} />
          ))}
        </dl>
      </Section>
      <Section id="level-of-service" title="Level of service">
        <p className="max-w-prose">
          A letter for the mean delay of a movement or a junction. Two letters are told apart by the sample only where the whole 95 % interval lies within one of them. Pings do not show
          whether a movement is over capacity, which the manual would also grade F.
        </p>
        <LosTable />
        <Source>Highway Capacity Manual, 7th edition, Exhibit 19-8, motorised vehicles at signalised junctions.</Source>
      </Section>
      <Section id="evidence" title="Evidence">
        <p className="max-w-prose">How far the sample supports a mean delay. A grade asks for all of its row; the first row that is met counts. The bounds are our own.</p>
        <p className="max-w-prose">{NO_EVIDENCE_RULE}</p>
        <EvidenceTable />
      </Section>
      <Section id="sample" title="What the sample can say">
        <p className="max-w-prose">
          Pings come from a few per cent of the vehicles, and not from a random few: fleets drive other streets and hours than residents. Means of delay stand that well, counts of traffic do
          not, and queues are seen only as far back as a sampled vehicle stood.
        </p>
        <IntervalTable />
      </Section>
      <Section id="accuracy" title="How far off it was, where the truth is known">
        <p className="max-w-prose">
          Trajectories from a microscopic traffic simulator, on several invented street networks, were thinned and blurred like real pings, and the results compared with the full truth: the mean
          absolute error over movements, weighted by their vehicles. Most of it is chance: the same figure from the exact courses of the very vehicles sampled is nearly as far off. What remains
          is our own error. A real city has more days, which narrows the first part. Networks with a star were kept aside: nobody looked at them while the method was tuned.
        </p>
        {MAIN_SAMPLINGS.map((sampling) => (
          <AccuracyTable key={sampling} sampling={sampling} />
        ))}
      </Section>
      <Section id="cautions" title="Cautions">
        <ul className="max-w-prose list-disc pl-5">
          {CAUTIONS.map((caution) => (
            <li key={caution}>{caution}</li>
          ))}
        </ul>
        <p className="max-w-prose text-ink-soft">These pages describe method version {METHOD_VERSION}. Figures of different versions are not compared with each other.</p>
      </Section>
    </div>
  );
}

function Section({ id, title, children }: { id: string; title: string; children: ReactNode }) {
  return (
    <section aria-labelledby={id} className="flex flex-col gap-3">
      <h2 id={id} className="border-b border-ink pb-1 text-xl">
        {title}
      </h2>
      {children}
    </section>
  );
}

function DefinitionEntry({ definition }: { definition: Definition }) {
  return (
    <div className="grid gap-x-8 border-b border-rule py-4 sm:grid-cols-[11rem_minmax(0,1fr)]">
      <dt id={definition.id} className="font-table text-lg font-semibold leading-snug">
        {definition.term}
      </dt>
      <dd className="flex max-w-prose flex-col gap-1.5">
        {definition.meaning.map((paragraph) => (
          <p key={paragraph}>{paragraph}</p>
        ))}
        {definition.formula ? <p className="my-1 border-l-2 border-pick pl-3 font-table text-[1.05rem] font-medium tabular-nums">{definition.formula}</p> : null}
        {definition.source ? <Source>{definition.source}</Source> : null}
      </dd>
    </div>
  );
}

function Source({ children }: { children: ReactNode }) {
  return <p className="text-sm text-ink-soft">{children}</p>;
}
