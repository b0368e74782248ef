import type { ReactNode } from "react";
import { EVIDENCE_RULES } from "@/core/scores/evidence";
import { SIGNALISED_LOS } from "@/core/stats/level-of-service";
import { EvidenceBar } from "@/ui/primitives/evidence-bar";
import { LosSquare } from "@/ui/primitives/los-square";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { MEASURED_ACCURACY, type MAIN_SAMPLINGS } from "./accuracy";

export function LosTable() {
  return (
    <RuledTable caption="Level of service by mean control delay" className="max-w-md">
      <thead>
        <tr>
          <Th>level of service</Th>
          <Th numeric>more than, s/veh</Th>
          <Th numeric>up to, s/veh</Th>
        </tr>
      </thead>
      <tbody>
        {SIGNALISED_LOS.map(({ letter, upToS }, at) => (
          <tr key={letter}>
            <Td>
              <LosSquare los={{ at: letter, low: letter, high: letter }} />
            </Td>
            <Td numeric>{at === 0 ? "–" : SIGNALISED_LOS[at - 1].upToS}</Td>
            <Td numeric>{Number.isFinite(upToS) ? upToS : "–"}</Td>
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}

export function EvidenceTable() {
  return (
    <RuledTable caption="What each evidence grade asks for" className="max-w-2xl">
      <thead>
        <tr>
          <Th>evidence</Th>
          <Th numeric>traversals</Th>
          <Th numeric>different vehicles</Th>
          <Th numeric>days</Th>
          <Th>mean delay known to within</Th>
        </tr>
      </thead>
      <tbody>
        {EVIDENCE_RULES.map((rule) => (
          <tr key={rule.grade}>
            <Td>
              <EvidenceBar evidence={rule.grade} withWord />
            </Td>
            <Td numeric>{rule.vehicles}</Td>
            <Td numeric>{rule.distinctVehicles}</Td>
            <Td numeric>{rule.days}</Td>
            <Td>{Number.isFinite(rule.halfWidthS) ? `± ${rule.halfWidthS} s or ${Math.round(rule.halfWidthShare * 100)} %, the wider` : "any"}</Td>
          </tr>
        ))}
        <tr>
          <Td>
            <EvidenceBar evidence="none" withWord />
          </Td>
          <Td colSpan={4}>less than that: no rank; no figure in lists, on the map, in exports and in reports</Td>
        </tr>
      </tbody>
    </RuledTable>
  );
}

const BY_INTERVAL = [
  {
    every: "1 to 6 s",
    delay: "means and single values",
    stops: "seen",
    queues: "reach and spillback as far as the sampled vehicles stood",
  },
  {
    every: "7 to 15 s",
    delay: "means; single values to a few seconds",
    stops: "partly inferred from lost time; short ones are missed, so the number is a lower bound",
    queues: "tails shorter than a few vehicles are missed; spillback is a lower bound",
  },
  {
    every: "16 to 30 s",
    delay: "means of many vehicles; passages without a ping on both sides of the stop line are not counted",
    stops: "a lower bound",
    queues: "not to be relied on",
  },
  {
    every: "more than 30 s",
    delay: "coarse means at busy junctions only",
    stops: "not to be relied on",
    queues: "not to be relied on",
  },
] as const;

export function IntervalTable() {
  return (
    <RuledTable caption="What the sample can say, by time between pings" className="min-w-[40rem]">
      <thead>
        <tr>
          <Th>a ping every</Th>
          <Th>delay</Th>
          <Th>stops</Th>
          <Th>queues</Th>
        </tr>
      </thead>
      <tbody>
        {BY_INTERVAL.map((row) => (
          <tr key={row.every}>
            <RowHead>
              {row.every}
            </RowHead>
            <Td>{row.delay}</Td>
            <Td>{row.stops}</Td>
            <Td>{row.queues}</Td>
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}

export function AccuracyTable({ sampling }: { sampling: (typeof MAIN_SAMPLINGS)[number] }) {
  const [share, every] = sampling.split(", ");
  return (
    <RuledTable caption={`${share} of the vehicles, a ping every ${every}`} showCaption className="min-w-[52rem]">
      <thead>
        <tr>
          <Th>network</Th>
          <Th numeric>error of a movement’s mean delay</Th>
          <Th numeric>of the sample alone</Th>
          <Th numeric>bias</Th>
          <Th numeric>turns right</Th>
          <Th numeric>legs found, of them true</Th>
          <Th numeric>error of the farthest reach</Th>
          <Th numeric>of the sample alone</Th>
          <Th numeric>95 % intervals that hold</Th>
        </tr>
      </thead>
      <tbody>
        {MEASURED_ACCURACY.filter((row) => row.sampling === sampling).map((row) => (
          <tr key={row.network}>
            <RowHead>
              {row.network}
              {row.isKeptAside ? " *" : ""}
            </RowHead>
            <Td numeric className="whitespace-nowrap">{row.delayErrorS.toFixed(1)} s</Td>
            <Td numeric className="whitespace-nowrap">{row.sampleErrorS.toFixed(1)} s</Td>
            <Td numeric className="whitespace-nowrap">{row.biasS.toFixed(1)} s</Td>
            <Td numeric className="whitespace-nowrap">{percent(row.turnsRight, 1)}</Td>
            <Td numeric className="whitespace-nowrap">
              {percent(row.legsFound, 1)}, {percent(row.legsTrue, 1)}
            </Td>
            <Td numeric>{Math.round(row.reachErrorM)} m</Td>
            <Td numeric>{Math.round(row.sampleReachErrorM)} m</Td>
            <Td numeric>{row.intervalsHold === null ? "–" : percent(row.intervalsHold, 0)}</Td>
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}

const percent = (share: number, digits: number) => `${(share * 100).toFixed(digits)} %`;

/** Looks like a cell and is read out before each of its row. */
function RowHead({ children }: { children: ReactNode }) {
  return (
    <th scope="row" className="whitespace-nowrap border-b border-rule px-2 py-2 text-left align-top font-medium">
      {children}
    </th>
  );
}
