"use client";

import { useEffect, useId, useRef, useState, type DragEvent } from "react";
import { formatBytes } from "@/ui/format";
import { classNames } from "@/ui/primitives/class-names";
import { useCity } from "@/ui/shell/city";

const ACCEPTED = ".csv,.tsv,.txt,.json,.geojson,.gz,text/csv,application/geo+json,application/gzip";

/** A file from the disk, by the browser's own chooser or dropped onto the frame. */
export function FileChooser({ file, onChoose, describedBy }: { file: File | null; onChoose: (file: File) => void; describedBy?: string }) {
  const id = useId();
  const { locale } = useCity();
  const [isOver, setOver] = useState(false);
  const input = useRef<HTMLInputElement>(null);

  // One may be chosen before the page listens.
  useEffect(() => {
    const [early] = input.current?.files ?? [];
    if (early) onChoose(early);
  }, [onChoose]);

  function drop(event: DragEvent) {
    event.preventDefault();
    setOver(false);
    const [dropped] = event.dataTransfer.files;
    if (dropped) onChoose(dropped);
  }

  return (
    <div
      onDragOver={(event) => {
        event.preventDefault();
        setOver(true);
      }}
      onDragLeave={() => setOver(false)}
      onDrop={drop}
      className={classNames("border border-dashed px-4 py-4", isOver ? "border-pick bg-[#E3ECE8]" : "border-ink-soft/70 bg-sheet")}
    >
      <label htmlFor={id} className="block text-sm font-medium">
        File
      </label>
      <input
        ref={input}
        id={id}
        type="file"
        accept={ACCEPTED}
        aria-describedby={describedBy}
        onChange={(event) => {
          const [chosen] = event.target.files ?? [];
          if (chosen) onChoose(chosen);
        }}
        className="mt-1.5 block w-full max-w-full text-[0.95rem] file:mr-3 file:min-h-9 file:border file:border-solid file:border-ink-soft/60 file:bg-sheet file:px-3.5 file:font-table file:font-medium file:hover:border-ink"
      />
      <p className="mt-1.5 text-sm text-ink-soft">{file ? `${file.name}, ${formatBytes(file.size, locale)}` : "Or drop it here."}</p>
    </div>
  );
}
