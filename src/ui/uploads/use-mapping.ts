"use client";

import { useState } from "react";
import type { Detection, FileMapping } from "@/domain/upload";
import { useCity } from "@/ui/shell/city";
import type { KnownSupplier } from "./queries";
import { remembered, withColumnAs } from "./mapping-state";

/** What a supplier's last file says about this one. */
export type SupplierMatch = "unknown" | "taken" | "differs";

/** The mapping as found out, with what the person changed in it. */
export function useMapping(detection: Detection) {
  const { settings } = useCity();
  const [changes, setChanges] = useState<Partial<FileMapping>>({});
  const [supplier, setSupplier] = useState("");
  const { header } = detection;
  // Times without a zone are most likely those of the city.
  const found: FileMapping = { ...detection.mapping, timeZone: settings.timeZone };
  // A new cut into columns makes changed columns meaningless; the caller resets them.
  const mapping: FileMapping = { ...found, ...changes };

  return {
    mapping,
    supplier,
    change: (part: Partial<FileMapping>) => setChanges((before) => ({ ...before, ...part })),
    useColumn: (at: number, field: string) => setChanges((before) => ({ ...before, columns: withColumnAs(mapping, header, at, field).columns })),
    /** Forgets the columns that were chosen: the file is about to be cut afresh. */
    forgetColumns: () => setChanges(({ columns: _, ...rest }) => rest),
    /** Takes the supplier's last mapping over where it fits. */
    chooseSupplier(name: string, known: readonly KnownSupplier[]): SupplierMatch {
      setSupplier(name);
      const before = known.find((one) => one.name.toLowerCase() === name.trim().toLowerCase());
      if (!before?.mapping) return "unknown";
      const mappingBefore = remembered(before.mapping, found, header);
      if (mappingBefore === null) return "differs";
      const { columns, decimal, timeFormat, timeZone, speedUnit } = mappingBefore;
      setChanges({ columns, decimal, timeFormat, timeZone, speedUnit });
      return "taken";
    },
  };
}
