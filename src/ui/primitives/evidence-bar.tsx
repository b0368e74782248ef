import type { Evidence } from "@/core/types";

const FILL: Record<Evidence, number> = { none: 0, thin: 1, fair: 2, strong: 3 };

export const EVIDENCE_SENTENCES: Record<Evidence, string> = {
  none: "No evidence: too few vehicles were seen. A figure beside it is neither ranked nor published.",
  thin: "Thin evidence: the figure could be far off.",
  fair: "Fair evidence: good enough to compare, not to settle a close call.",
  strong: "Strong evidence.",
};

/** Three thirds, as many filled as the evidence is strong; the word stands beside it or is read out. */
export function EvidenceBar({ evidence, withWord = false }: { evidence: Evidence; withWord?: boolean }) {
  return (
    <span className="inline-flex items-center gap-2" title={EVIDENCE_SENTENCES[evidence]}>
      <svg aria-hidden="true" width="37" height="8" viewBox="0 0 37 8" className="shrink-0">
        {[0, 1, 2].map((third) => (
          <rect
            key={third}
            x={0.5 + third * 12.5}
            y="0.5"
            width="11"
            height="7"
            fill={third < FILL[evidence] ? "#16213A" : "#FFFDF8"}
            stroke={third < FILL[evidence] ? "#16213A" : "#8A8FA0"}
          />
        ))}
      </svg>
      <span className={withWord ? "" : "sr-only"}>{evidence}</span>
    </span>
  );
}
