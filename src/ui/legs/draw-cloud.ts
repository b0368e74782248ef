import type { PingCloud } from "@/domain/leg-check";
import type { PlanScale } from "@/ui/junctions/plan-geometry";
import { directionColor, pingSpeedColor, type CloudStyle } from "./cloud-colors";

const TICK_PX = 7;
const DOT_PX = 2.2;

/** Each ping as a stroke that points the way the vehicle went, or a dot where it gave no heading. */
export function drawCloud(ctx: CanvasRenderingContext2D, cloud: PingCloud, scale: PlanScale, style: CloudStyle): void {
  if (style === "hidden") return;
  ctx.globalAlpha = 0.6;
  ctx.lineWidth = 1.3;
  for (let i = 0; i < cloud.eastM.length; i++) {
    const [x, y] = [scale.x(cloud.eastM[i]), scale.y(cloud.northM[i])];
    const heading = cloud.headingDeg[i];
    const color = style === "direction" ? directionColor(heading) : pingSpeedColor(cloud.speedMs[i]);
    if (heading === null) {
      ctx.fillStyle = color;
      ctx.fillRect(x - DOT_PX / 2, y - DOT_PX / 2, DOT_PX, DOT_PX);
      continue;
    }
    const [dx, dy] = [Math.sin((heading * Math.PI) / 180) * TICK_PX, -Math.cos((heading * Math.PI) / 180) * TICK_PX];
    ctx.strokeStyle = color;
    ctx.beginPath();
    ctx.moveTo(x - dx / 2, y - dy / 2);
    ctx.lineTo(x + dx / 2, y + dy / 2);
    ctx.stroke();
    ctx.fillStyle = color;
    ctx.fillRect(x + dx / 2 - 1.1, y + dy / 2 - 1.1, 2.2, 2.2);
  }
  ctx.globalAlpha = 1;
}
