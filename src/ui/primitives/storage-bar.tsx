/** How much of the storage the reach takes; vermilion from 90 % on, where the queue counts as spilling back. */
export function StorageBar({ reachM, storageM, spillsFrom = 0.9 }: { reachM: number | null; storageM: number | null; spillsFrom?: number }) {
  if (reachM === null || !storageM) return <span className="text-ink-soft">–</span>;
  const share = Math.min(1, Math.max(0, reachM / storageM));
  const isFull = share >= spillsFrom;
  const words = `${Math.round((reachM / storageM) * 100)} % of the storage`;
  return (
    <span title={words}>
      <svg aria-hidden="true" width="40" height="10" viewBox="0 0 40 10">
        <rect x="0.5" y="0.5" width="39" height="9" fill="#FFFDF8" stroke="#8A8FA0" />
        <rect x="1" y="1" width={38 * share} height="8" fill={isFull ? "#C43E1C" : "#8D97AE"} />
        {isFull ? <line x1="36" x2="36" y1="0" y2="10" stroke="#16213A" strokeWidth="1.25" /> : null}
      </svg>
      <span className="sr-only">{words}</span>
    </span>
  );
}
