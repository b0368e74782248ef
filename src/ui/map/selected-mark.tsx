import { Marker } from "react-map-gl/maplibre";

const SIDE = 74;
/** A hexagon a little turned, so that none of its sides lies along a street grid. */
const HEXAGON = Array.from({ length: 6 }, (_, corner) => {
  const angle = ((corner * 60 + 11) * Math.PI) / 180;
  return `${SIDE / 2 + 34 * Math.sin(angle)},${SIDE / 2 - 34 * Math.cos(angle)}`;
}).join(" ");

/** Round the selected junction, with its name and the movement to look at first. */
export function SelectedMark(props: { lat: number; lon: number; name: string; note: string | null; side: "left" | "right" }) {
  return (
    <Marker longitude={props.lon} latitude={props.lat} style={{ zIndex: 2, pointerEvents: "none" }}>
      <div className="relative">
        <svg aria-hidden="true" width={SIDE} height={SIDE} className="block overflow-visible">
          <polygon points={HEXAGON} fill="none" stroke="#FFFDF8" strokeWidth="5" />
          <polygon points={HEXAGON} fill="none" stroke="#0B6E69" strokeWidth="2" />
        </svg>
        <p className={`absolute top-1/2 w-max max-w-[min(13rem,calc(50cqw-3.2rem))] -translate-y-1/2 bg-sheet/90 px-1.5 py-0.5 font-table leading-tight text-ink ${props.side === "right" ? "left-full ml-1" : "right-full mr-1"}`}>
          <span className="block text-[0.95rem] font-semibold">{props.name}</span>
          {props.note ? <span className="block text-sm text-ink-soft">{props.note}</span> : null}
        </p>
      </div>
    </Marker>
  );
}

/** Under the pointer: only the name. */
export function HoveredMark(props: { lat: number; lon: number; name: string }) {
  return (
    <Marker longitude={props.lon} latitude={props.lat} anchor="bottom" offset={[0, -10]} style={{ zIndex: 3, pointerEvents: "none" }}>
      <p className="border border-ink bg-sheet px-1.5 py-0.5 font-table text-sm font-medium leading-tight text-ink">{props.name}</p>
    </Marker>
  );
}
