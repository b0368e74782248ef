import { formatNumber, lengthFromMetres, lengthUnit, type Units } from "@/ui/format";
import { DELAY_SCALE, NO_DATA_COLOR } from "@/ui/scales";

const WIDEST_PX = 110;
const STEPS = [1, 2, 5];

/** The longest round length, in the city's unit, that is at most `widestPx` wide on the map. */
export function groundRule(metresPerPx: number, units: Units, widestPx = WIDEST_PX): { length: number; px: number } {
  const perPx = lengthFromMetres(metresPerPx, units);
  const most = perPx * widestPx;
  const decade = 10 ** Math.floor(Math.log10(most));
  const step = STEPS.filter((value) => value * decade <= most).at(-1) ?? 1;
  return { length: step * decade, px: (step * decade) / perPx };
}

/** The delay ramp with its bounds, and a rule that says how long a needle is on the ground. */
export function MapLegend({ metresPerPx, units, locale }: { metresPerPx: number; units: Units; locale: string }) {
  const rule = groundRule(metresPerPx, units);
  return (
    <div className="pointer-events-none absolute bottom-3 left-3 max-w-[calc(100%-1.5rem)] border border-rule bg-sheet px-2.5 py-1.5 font-table text-sm leading-tight text-ink-soft">
      <div className="flex items-start gap-2.5">
        <span>
          mean delay,
          <br />
          s per vehicle
        </span>
        <ol className="flex" aria-label="Colours of delay">
          {DELAY_SCALE.map((step) => (
            <li key={step.from} className="w-8">
              <span aria-hidden="true" className="block h-3" style={{ background: step.color }} />
              {step.from}
            </li>
          ))}
        </ol>
        <span>
          <span aria-hidden="true" className="block h-3 w-5" style={{ background: NO_DATA_COLOR }} />
          no data
        </span>
      </div>
      <div className="mt-1 flex items-center gap-2">
        <span>needle: the leg’s reach on the ground</span>
        <svg aria-hidden="true" width={rule.px} height="9" className="shrink-0 overflow-visible">
          <path d={`M0.5 0V8M0.5 4.5H${rule.px}M${rule.px - 0.5} 0V8`} stroke="#16213A" strokeWidth="1.25" />
        </svg>
        <span>
          {formatNumber(rule.length, locale)} {lengthUnit(units)}
        </span>
      </div>
    </div>
  );
}
