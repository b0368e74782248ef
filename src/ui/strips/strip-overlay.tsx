import { cellCentre } from "@/core/strips/strip";
import { COLORS } from "@/ui/scales";
import type { ReadOut } from "./strip-cursor";
import { scalesOf, type StripLayout } from "./strip-layout";
import type { StripPicture } from "./strip-picture";

const BOX_PX = 236;

/** The cursor over the canvas: a line through strip and delay, the cell's outline, and what it says. */
export function StripOverlay({ picture, layout, cell, text }: { picture: StripPicture; layout: StripLayout; cell: number; text: ReadOut }) {
  const { plot, delay } = layout;
  const scales = scalesOf(plot, picture.window);
  const x = Math.round(scales.x(cellCentre(picture.strip.spec, cell).tS)) + 0.5;
  const outline = cornersOf(picture, cell)
    .map(([tS, sM]) => `${scales.x(tS).toFixed(1)},${Math.max(plot.top, scales.y(sM)).toFixed(1)}`)
    .join(" ");
  const onLeft = x + 12 + BOX_PX > layout.width;
  return (
    <>
      <svg aria-hidden="true" className="pointer-events-none absolute inset-0" width={layout.width} height={layout.height}>
        <line x1={x} x2={x} y1={plot.top} y2={delay.top + delay.height} stroke={COLORS.pick} strokeWidth="1.25" />
        <polygon points={outline} fill="none" stroke={COLORS.sheet} strokeWidth="3.5" />
        <polygon points={outline} fill="none" stroke={COLORS.pick} strokeWidth="1.75" />
      </svg>
      <div
        aria-hidden="true"
        data-testid="read-out"
        className="pointer-events-none absolute border border-pick bg-sheet px-2.5 py-1.5 font-table text-[0.92rem] leading-snug"
        style={{ top: plot.top + 6, maxWidth: BOX_PX, left: onLeft ? undefined : x + 9, right: onLeft ? Math.min(layout.width - x + 9, layout.width - 150) : undefined }}
      >
        <p className="font-semibold">{text.where}</p>
        <p>{text.cell}</p>
        {text.tail ? <p className="text-tail">{text.tail}</p> : null}
        {text.delay ? <p className="text-ink-soft">{text.delay}</p> : null}
      </div>
    </>
  );
}

function cornersOf({ strip: { spec } }: StripPicture, cell: number): [number, number][] {
  const column = cell % spec.columns;
  const row = (cell - column) / spec.columns;
  const t = spec.startS + column * spec.cellS;
  const [low, high] = [spec.bottomM + row * spec.cellM, spec.bottomM + (row + 1) * spec.cellM];
  return [
    [t + low / spec.waveMs, low],
    [t + spec.cellS + low / spec.waveMs, low],
    [t + spec.cellS + high / spec.waveMs, high],
    [t + high / spec.waveMs, high],
  ];
}
