import type { Turn } from "@/core/types";

const PATHS: Record<Turn, string> = {
  left: "M10.5 14V8.5Q10.5 5.5 7.5 5.5H3M6 2.5 3 5.5l3 3",
  through: "M8 14V3M5 6l3-3 3 3",
  right: "M5.5 14V8.5Q5.5 5.5 8.5 5.5H13M10 2.5l3 3-3 3",
  uturn: "M12 14V7a3.75 3.75 0 0 0-7.5 0v5.5M1.8 9.8l2.7 2.7 2.7-2.7",
};

/** The movement as an arrow that enters from below. The word always stands beside it. */
export function TurnArrow({ turn }: { turn: Turn }) {
  return (
    <svg aria-hidden="true" width="13" height="13" viewBox="0 0 16 16" className="mr-0.5 inline-block align-[-0.1em]" fill="none" stroke="#16213A" strokeWidth="1.5">
      <path d={PATHS[turn]} />
    </svg>
  );
}
