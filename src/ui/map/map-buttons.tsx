"use client";

const BUTTON = "flex size-9 items-center justify-center bg-sheet hover:bg-paper";

/** Zoom and the way back to the whole city. */
export function MapButtons({ onZoom, onWhole }: { onZoom: (by: 1 | -1) => void; onWhole: () => void }) {
  return (
    <div className="absolute right-3 top-3 flex flex-col divide-y divide-rule border border-ink-soft/60">
      <button type="button" className={BUTTON} aria-label="Closer" onClick={() => onZoom(1)}>
        <Sign path="M3 8h10M8 3v10" />
      </button>
      <button type="button" className={BUTTON} aria-label="Farther" onClick={() => onZoom(-1)}>
        <Sign path="M3 8h10" />
      </button>
      <button type="button" className={BUTTON} aria-label="The whole city" onClick={onWhole}>
        <Sign path="M2 6V2h4M10 2h4v4M14 10v4h-4M6 14H2v-4" />
      </button>
    </div>
  );
}

function Sign({ path }: { path: string }) {
  return (
    <svg aria-hidden="true" width="16" height="16" viewBox="0 0 16 16" fill="none" stroke="#16213A" strokeWidth="1.5">
      <path d={path} />
    </svg>
  );
}
