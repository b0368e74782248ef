/** Widths of cells that are offered, s. */
export const CELL_SECONDS = [5, 10, 15, 30, 60, 120, 300, 900] as const;
/** More columns than this are finer than any window can show. */
const MOST_COLUMNS = 1440;

/** The chosen width, or the finest offered that the length of the window allows. O(1). */
export function drawableCellS(cellS: number, window: { fromS: number; toS: number }): number {
  const least = (window.toS - window.fromS) / MOST_COLUMNS;
  return cellS >= least ? cellS : (CELL_SECONDS.find((choice) => choice >= least) ?? cellS);
}
