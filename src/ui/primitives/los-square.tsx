/** Level of service: a letter in a square, never a colour alone; with the letters at the ends of its interval where they differ. */
export function LosSquare({ los }: { los: { at: string; low: string; high: string } | null }) {
  if (!los) return <span className="text-ink-soft">–</span>;
  const span = los.low === los.high ? null : `${los.low} to ${los.high}`;
  return (
    <span className="inline-flex items-center gap-1.5" title={span ? `Level of service ${los.at}; it could be ${span}` : `Level of service ${los.at}`}>
      <span className="inline-flex size-[1.35rem] items-center justify-center border-[1.5px] border-ink font-table text-[0.85rem] font-semibold leading-none">{los.at}</span>
      {span ? <span className="sr-only">, could be {span}</span> : null}
    </span>
  );
}
