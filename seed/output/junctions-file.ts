import type { City } from "../network/types";
import { latOf, lonOf } from "../plane";
import type { SignalPlan } from "../signals/plan";

const HEADER = "junction_id,name,lat,lon,corridor,corridor_order,district,cycle_s,last_retimed,notes";

/** The junctions file as an agency would hand it over; the cycle is that of the evening plan. */
export function junctionsCsv(city: City, plan: SignalPlan): string {
  const rows = city.nodes
    .filter((node) => !node.isGate)
    .map((node) => {
      const lastYear = 2012 + ((node.index * 7) % 13);
      const retimed = `${lastYear}-${String(1 + ((node.index * 5) % 12)).padStart(2, "0")}-${String(1 + ((node.index * 11) % 28)).padStart(2, "0")}`;
      const legs = node.inbound.length;
      const notes = legs > 4 ? "Five legs" : node.index % 23 === 0 ? "Pedestrian count due" : "";
      return [
        node.id, node.name, latOf(node.point[1]).toFixed(6), lonOf(node.point[0]).toFixed(6), node.corridor,
        node.corridorOrder || "", node.district, Math.round(plan.cycleS[node.index]), retimed, notes,
      ].join(",");
    });
  return `${HEADER}\n${rows.join("\n")}\n`;
}
