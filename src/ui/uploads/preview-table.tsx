"use client";

import { fieldsOf, type Detection, type FileMapping, type UploadKind } from "@/domain/upload";
import { Select } from "@/ui/primitives/field";
import { classNames } from "@/ui/primitives/class-names";
import { RuledTable, Td, Th } from "@/ui/primitives/table";
import { fieldName, fieldOfColumn } from "./mapping-state";

interface Props {
  kind: UploadKind;
  detection: Detection;
  mapping: FileMapping;
  needed: readonly string[];
  onUse: (column: number, field: string) => void;
}

/** The first rows as they stand, above each column what it is used as. */
export function PreviewTable({ kind, detection, mapping, needed, onUse }: Props) {
  const { header, preview } = detection;
  const fields = fieldsOf(kind, mapping.format);
  const used = header.map((_, at) => fieldOfColumn(mapping, header, at));
  return (
    <RuledTable caption="First rows of the file" className="w-auto min-w-full">
      <thead>
        <tr>
          {header.map((name, at) => (
            <Th key={at} className="min-w-36 border-rule">
              <Select aria-label={`Column ${name || at + 1} is used as`} value={used[at]} onChange={(event) => onUse(at, event.target.value)} className={classNames("font-table text-base text-ink", used[at] === "" && "text-ink-soft")}>
                <option value="">not used</option>
                <FieldOptions label="needed" fields={fields.filter((field) => needed.includes(field))} />
                <FieldOptions label="optional" fields={fields.filter((field) => !needed.includes(field))} />
              </Select>
            </Th>
          ))}
        </tr>
        <tr>
          {header.map((name, at) => (
            <Th key={at} className="break-all">
              {name || `column ${at + 1}`}
            </Th>
          ))}
        </tr>
      </thead>
      <tbody>
        {preview.map((row, line) => (
          <tr key={line}>
            {header.map((_, at) => (
              <Td key={at} className={classNames("max-w-64 break-all", used[at] === "" && "text-ink-soft")}>
                {row[at] ?? ""}
              </Td>
            ))}
          </tr>
        ))}
      </tbody>
    </RuledTable>
  );
}

function FieldOptions({ label, fields }: { label: string; fields: readonly string[] }) {
  return (
    <optgroup label={label}>
      {fields.map((field) => (
        <option key={field} value={field}>
          {fieldName(field)}
        </option>
      ))}
    </optgroup>
  );
}
