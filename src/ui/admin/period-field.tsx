import type { PeriodKey, TimeWindow } from "@/domain/periods";
import { formatClock } from "@/ui/format";
import { Select } from "@/ui/primitives/field";

export type NamedPeriod = Exclude<PeriodKey, "all">;

const QUARTERS = Array.from({ length: 97 }, (_, at) => at * 15);

export interface PeriodFieldProps {
  name: string;
  window: TimeWindow;
  onChange: (window: TimeWindow) => void;
}

/** From and to of one period; an end before the beginning is not offered. */
export function PeriodField({ name, window, onChange }: PeriodFieldProps) {
  const choose = (fromMin: number, toMin: number) => onChange({ fromMin, toMin: Math.max(toMin, fromMin + 15) });
  return (
    <div role="group" aria-label={name} className="grid grid-cols-[7rem_1fr_auto_1fr] items-center gap-3 sm:max-w-md">
      <span className="font-medium first-letter:uppercase">{name}</span>
      <Select aria-label={`${name} from`} value={window.fromMin} onChange={(event) => choose(Number(event.target.value), window.toMin)}>
        {QUARTERS.slice(0, -1).map((minute) => (
          <option key={minute} value={minute}>
            {formatClock(minute)}
          </option>
        ))}
      </Select>
      <span>to</span>
      <Select aria-label={`${name} to`} value={window.toMin} onChange={(event) => choose(window.fromMin, Number(event.target.value))}>
        {QUARTERS.filter((minute) => minute > window.fromMin).map((minute) => (
          <option key={minute} value={minute}>
            {formatClock(minute)}
          </option>
        ))}
      </Select>
    </div>
  );
}
