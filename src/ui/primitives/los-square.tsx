/**
 * Level of service: a letter in a square, never a colour alone. Where the sample does not settle it, the letters at
 * the ends of the interval stand beside it like the limits of a dimension on a drawing: upper end above, lower below.
 */
export function LosSquare({ los }: { los: { at: string; low: string; high: string } | null }) {
  if (!los) return <span className="text-ink-soft">–</span>;
  const span = los.low === los.high ? null : `${los.low} to ${los.high}`;
  return (
    <span className="inline-flex items-center gap-[3px]" title={span ? `Level of service ${los.at}; it could be ${span}` : `Level of service ${los.at}`}>
      <span className="inline-flex size-[1.35rem] items-center justify-center border-[1.5px] border-ink font-table text-[0.85rem] font-semibold leading-none">{los.at}</span>
      {span ? (
        <>
          <span aria-hidden="true" className="flex h-[1.35rem] flex-col justify-between font-table text-[0.7rem] leading-[0.6rem] text-ink-soft">
            <span>{los.high === los.at ? "\u00a0" : los.high}</span>
            <span>{los.low === los.at ? "\u00a0" : los.low}</span>
          </span>
          <span className="sr-only">, could be {span}</span>
        </>
      ) : null}
    </span>
  );
}
