"use client";

import type { ScreenQuery, ScreenResult } from "@/domain/screen";
import { DAY_TYPE_NAMES, DAY_TYPES } from "@/domain/screen-choices";
import { PERIOD_KEYS, PERIOD_NAMES, periodWindow } from "@/domain/periods";
import type { CitySettings } from "@/domain/settings";
import { formatClock, formatClockRange } from "@/ui/format";
import { ChoiceList } from "@/ui/primitives/choice";
import { Field, Input, Select } from "@/ui/primitives/field";
import { SentenceControl } from "@/ui/primitives/sentence";
import { daysPhrase, windowPhrase } from "./phrases";

export type WhenPart = Pick<ScreenQuery, "period" | "from" | "to" | "days" | "since" | "until">;

export interface WhenControlProps {
  query: WhenPart;
  onChange: (part: Partial<WhenPart>) => void;
}

export function DaysControl({ query, onChange, basis, locale }: WhenControlProps & { basis?: ScreenResult["basis"]; locale: string }) {
  const hasDates = query.since !== undefined || query.until !== undefined;
  return (
    <SentenceControl name="Days" phrase={daysPhrase(query, basis, locale)}>
      {(close) => (
        <ChoiceList
          legend="Days of the week"
          choices={DAY_TYPES.map((value) => ({ value, label: DAY_TYPE_NAMES[value] }))}
          value={query.days}
          onChoose={(days) => onChange({ days })}
          onSettle={close}
          staysOpen
        >
          <div className="mt-3 grid grid-cols-2 gap-3 border-t border-rule pt-3">
            <DateField label="From" value={query.since} max={query.until} onChange={(since) => onChange({ since })} />
            <DateField label="Until" value={query.until} min={query.since} onChange={(until) => onChange({ until })} />
          </div>
          {hasDates ? (
            <button type="button" className="text-link mt-2.5 min-h-6 text-sm" onClick={() => onChange({ since: undefined, until: undefined })}>
              All dates with data
            </button>
          ) : null}
        </ChoiceList>
      )}
    </SentenceControl>
  );
}

function DateField(props: { label: string; value?: string; min?: string; max?: string; onChange: (value?: string) => void }) {
  return (
    <Field label={props.label}>
      {(told) => (
        <Input {...told} type="date" value={props.value ?? ""} min={props.min} max={props.max} onChange={(event) => props.onChange(event.target.value || undefined)} />
      )}
    </Field>
  );
}

const STEP_MIN = 15;
const STARTS = Array.from({ length: 1440 / STEP_MIN }, (_, at) => at * STEP_MIN);

export function WindowControl({ query, onChange, settings }: WhenControlProps & { settings: CitySettings }) {
  const own = query.from !== undefined && query.to !== undefined ? { fromMin: query.from, toMin: query.to } : null;
  const window = own ?? periodWindow(settings, query.period);
  return (
    <SentenceControl name="Hours" phrase={windowPhrase(query, window)}>
      {(close) => (
        <ChoiceList
          legend="Time of day"
          choices={PERIOD_KEYS.map((value) => ({ value, label: PERIOD_NAMES[value], note: clockNote(settings, value) }))}
          value={own ? null : query.period}
          onChoose={(period) => onChange({ period, from: undefined, to: undefined })}
          onSettle={close}
          staysOpen
        >
          <div className="mt-3 grid grid-cols-2 gap-3 border-t border-rule pt-3">
            <ClockField label="Or from" value={window.fromMin} options={STARTS} onChange={(from) => onChange({ from, to: Math.max(window.toMin, from + STEP_MIN) })} />
            <ClockField
              label="to"
              value={window.toMin}
              options={STARTS.map((start) => start + STEP_MIN).filter((end) => end > window.fromMin)}
              onChange={(to) => onChange({ from: window.fromMin, to })}
            />
          </div>
        </ChoiceList>
      )}
    </SentenceControl>
  );
}

function clockNote(settings: CitySettings, key: ScreenQuery["period"]): string {
  const { fromMin, toMin } = periodWindow(settings, key);
  return formatClockRange(fromMin, toMin);
}

function ClockField(props: { label: string; value: number; options: number[]; onChange: (value: number) => void }) {
  return (
    <Field label={props.label}>
      {(told) => (
        <Select {...told} value={props.value} onChange={(event) => props.onChange(Number(event.target.value))}>
          {props.options.map((minutes) => (
            <option key={minutes} value={minutes}>
              {formatClock(minutes)}
            </option>
          ))}
        </Select>
      )}
    </Field>
  );
}
