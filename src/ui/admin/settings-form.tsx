"use client";

import { useRouter } from "next/navigation";
import { useState, type FormEvent } from "react";
import type { ActionResult } from "@/domain/errors";
import { PERIOD_NAMES, type TimeWindow } from "@/domain/periods";
import type { CitySettings } from "@/domain/settings";
import { FormProblem } from "@/ui/forms/form-problem";
import { useAction } from "@/ui/forms/use-action";
import { useIsReady } from "@/ui/forms/use-is-ready";
import { Button } from "@/ui/primitives/button";
import { Field, Input, Select } from "@/ui/primitives/field";
import { PeriodField, type NamedPeriod } from "./period-field";

export interface SettingsFormProps {
  settings: CitySettings;
  timeZones: string[];
  save: (input: CitySettings) => Promise<ActionResult<CitySettings>>;
}

const PERIODS: readonly NamedPeriod[] = ["am", "midday", "pm", "evening"];

export function SettingsForm({ settings, timeZones, save }: SettingsFormProps) {
  const router = useRouter();
  const isReady = useIsReady();
  const action = useAction(save);
  const [periods, setPeriods] = useState(settings.periods);
  const [isSaved, setSaved] = useState(false);
  const wrong = action.problem?.fieldErrors;

  async function submit(event: FormEvent<HTMLFormElement>) {
    event.preventDefault();
    const form = new FormData(event.currentTarget);
    setSaved(false);
    const done = await action.run({
      cityName: String(form.get("cityName")),
      timeZone: String(form.get("timeZone")),
      driveSide: form.get("driveSide") === "left" ? "left" : "right",
      units: form.get("units") === "us" ? "us" : "metric",
      periods,
    });
    if (!done) return;
    setSaved(true);
    router.refresh();
  }

  const setPeriod = (key: NamedPeriod, window: TimeWindow) => setPeriods({ ...periods, [key]: window });

  return (
    <form method="post" onSubmit={submit} className="flex max-w-3xl flex-col gap-6">
      <div className="grid gap-5 sm:grid-cols-2">
        <Field label="City" error={wrong?.cityName}>
          {(told) => <Input {...told} name="cityName" defaultValue={settings.cityName} maxLength={80} required />}
        </Field>
        <Field label="Time zone" hint="Days and periods follow it; times in files may differ." error={wrong?.timeZone}>
          {(told) => (
            <>
              <Input {...told} name="timeZone" list="time-zones" defaultValue={settings.timeZone} required />
              <datalist id="time-zones">
                {timeZones.map((zone) => (
                  <option key={zone} value={zone} />
                ))}
              </datalist>
            </>
          )}
        </Field>
        <Field label="Traffic drives on the">
          {(told) => (
            <Select {...told} name="driveSide" defaultValue={settings.driveSide}>
              <option value="right">right</option>
              <option value="left">left</option>
            </Select>
          )}
        </Field>
        <Field label="Units shown">
          {(told) => (
            <Select {...told} name="units" defaultValue={settings.units}>
              <option value="metric">metric: metres, km/h</option>
              <option value="us">US customary: feet, mph</option>
            </Select>
          )}
        </Field>
      </div>
      <fieldset className="flex flex-col gap-3">
        <legend className="mb-2 text-lg font-semibold">Periods</legend>
        <p className="text-sm text-ink-soft">Local times in quarters of an hour. Figures already computed are kept by the quarter, so a change takes hold at once.</p>
        {PERIODS.map((key) => (
          <PeriodField key={key} name={PERIOD_NAMES[key]} window={periods[key]} onChange={(window) => setPeriod(key, window)} />
        ))}
      </fieldset>
      <FormProblem problem={action.problem} />
      <div className="flex items-center gap-4">
        <Button type="submit" tone="strong" disabled={!isReady || action.isBusy}>
          {action.isBusy ? "Saving…" : "Save settings"}
        </Button>
        <span role="status">{isSaved ? "Saved." : ""}</span>
      </div>
    </form>
  );
}
