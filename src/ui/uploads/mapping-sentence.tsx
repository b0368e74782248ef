"use client";

import { useId } from "react";
import { isLocalTime, type FileMapping, type SpeedUnit, type TimeFormat, type UploadKind } from "@/domain/upload";
import { Button } from "@/ui/primitives/button";
import { ChoiceList, type Choice } from "@/ui/primitives/choice";
import { Field, Input } from "@/ui/primitives/field";
import { Sentence, SentenceControl } from "@/ui/primitives/sentence";
import type { SettledShape } from "./queries";

const DELIMITER_CHOICES: readonly Choice<string>[] = [
  { value: ",", label: "commas" },
  { value: ";", label: "semicolons" },
  { value: "\t", label: "tabs" },
];
const HEADER_CHOICES: readonly Choice<"yes" | "no">[] = [
  { value: "yes", label: "a header row" },
  { value: "no", label: "no header row" },
];
const DECIMAL_CHOICES: readonly Choice<"." | ",">[] = [
  { value: ".", label: "a decimal point" },
  { value: ",", label: "a decimal comma" },
];
const TIME_CHOICES: readonly Choice<TimeFormat>[] = [
  { value: "iso", label: "dates with their zone", note: "2026-03-02T08:00:00Z" },
  { value: "local", label: "dates without a zone", note: "2026-03-02 08:00:00, 02.03.2026 08:00" },
  { value: "local_mdy", label: "dates without a zone, month first", note: "03/02/2026 08:00:00, 3/2/2026 8:00 AM" },
  { value: "local_dmy", label: "dates without a zone, day first", note: "02/03/2026 08:00:00, 2/3/2026 8:00 AM" },
  { value: "epoch_s", label: "seconds since 1970", note: "1772438400" },
  { value: "epoch_ms", label: "milliseconds since 1970", note: "1772438400000" },
];
const SPEED_CHOICES: readonly Choice<SpeedUnit>[] = [
  { value: "kmh", label: "km/h" },
  { value: "mph", label: "mph" },
  { value: "ms", label: "m/s" },
  { value: "kn", label: "knots" },
];

function labelOf<T extends string>(choices: readonly Choice<T>[], value: T): string {
  return choices.find((choice) => choice.value === value)?.label ?? value;
}

interface Props {
  kind: UploadKind;
  mapping: FileMapping;
  gzip: boolean;
  onChange: (part: Partial<FileMapping>) => void;
  /** The file is to be cut into columns in another way. */
  onReshape: (settled: SettledShape) => void;
}

/** How the file will be read, in words; each phrase can be changed. */
export function MappingSentence({ kind, mapping, gzip, onChange, onReshape }: Props) {
  const packed = gzip ? "Packed with gzip, then " : "";
  const features = kind === "legs" ? "lines" : "points";
  return (
    <Sentence label="How the file is read">
      {mapping.format === "csv" ? (
        <>
          {packed}
          {packed ? "columns" : "Columns"} between{" "}
          <Pick name="Columns are separated by" choices={DELIMITER_CHOICES} value={mapping.delimiter} onChoose={(delimiter) => onReshape({ delimiter: delimiter as FileMapping["delimiter"] })} />, with{" "}
          <Pick name="Header" choices={HEADER_CHOICES} value={mapping.hasHeader ? "yes" : "no"} onChoose={(header) => onReshape({ header })} /> and numbers with{" "}
          <Pick name="Decimal mark" choices={DECIMAL_CHOICES} value={mapping.decimal} onChoose={(decimal) => onChange({ decimal })} />
        </>
      ) : (
        `${packed}${packed ? features : capital(features)} of GeoJSON`
      )}
      {kind === "pings" ? (
        <>
          ; times are <Pick name="Times" choices={TIME_CHOICES} value={mapping.timeFormat} onChoose={(timeFormat) => onChange({ timeFormat })} />
          {isLocalTime(mapping.timeFormat) ? (
            <>
              {" "}
              in <ZonePhrase zone={mapping.timeZone} onChoose={(timeZone) => onChange({ timeZone })} />
            </>
          ) : null}
          {mapping.columns.speed === undefined ? null : (
            <>
              , speeds in <Pick name="Unit of speed" choices={SPEED_CHOICES} value={mapping.speedUnit} onChoose={(speedUnit) => onChange({ speedUnit })} />
            </>
          )}
        </>
      ) : null}
      .
    </Sentence>
  );
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

function Pick<T extends string>({ name, choices, value, onChoose }: { name: string; choices: readonly Choice<T>[]; value: T; onChoose: (value: T) => void }) {
  return (
    <SentenceControl name={name} phrase={labelOf(choices, value)}>
      {(close) => <ChoiceList legend={name} choices={choices} value={value} onChoose={onChoose} onSettle={close} />}
    </SentenceControl>
  );
}

function ZonePhrase({ zone, onChoose }: { zone: string; onChoose: (zone: string) => void }) {
  const listId = useId();
  return (
    <SentenceControl name="Time zone" phrase={zone}>
      {(close) => (
        <div className="flex flex-col gap-3">
          <Field label="Time zone" hint="Area and place, such as Atlantic/Azores.">
            {(told) => (
              <Input
                {...told}
                list={listId}
                defaultValue={zone}
                onChange={(event) => onChoose(event.target.value)}
                onKeyDown={(event) => {
                  if (event.key !== "Enter") return;
                  // Enter would send the form around the sentence.
                  event.preventDefault();
                  close();
                }}
              />
            )}
          </Field>
          <datalist id={listId}>
            {Intl.supportedValuesOf("timeZone").map((name) => (
              <option key={name} value={name} />
            ))}
          </datalist>
          <Button onClick={close} className="self-start">
            Done
          </Button>
        </div>
      )}
    </SentenceControl>
  );
}
