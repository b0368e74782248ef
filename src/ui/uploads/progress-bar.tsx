/** How far a thing has come: a ruled bar, its share as a figure beside it. */
export function ProgressBar({ share, label }: { share: number; label: string }) {
  const percent = Math.round(Math.min(1, Math.max(0, share)) * 100);
  return (
    <div className="flex w-full items-center gap-3">
      <div role="progressbar" aria-label={label} aria-valuemin={0} aria-valuemax={100} aria-valuenow={percent} className="h-3 w-full max-w-96 min-w-24 border border-ink bg-sheet">
        <div className="h-full bg-ink" style={{ width: `${percent}%` }} />
      </div>
      <span className="tabular w-12 whitespace-nowrap text-right">{percent} %</span>
    </div>
  );
}
