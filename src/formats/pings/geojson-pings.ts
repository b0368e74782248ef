import type { FileMapping, RejectReason } from "@/domain/upload";
import { MAX_REJECT_TEXT } from "../csv/field";
import { propertyOf } from "../fields";
import { FeatureScanner } from "../geojson/feature-scanner";
import { pointFeature, propertyText } from "../geojson/point-feature";
import type { RowTally } from "../row-tally";
import type { VehicleNames } from "../vehicle-names";
import type { PingBatcher } from "./ping-batcher";
import { FIELD, PingJudge } from "./ping-judge";
import { ValueLine } from "./value-line";

/** A scanner that turns point features into pings: each value is judged as if it stood in a CSV file. */
export function geojsonPings(mapping: FileMapping, names: VehicleNames, batcher: PingBatcher, tally: RowTally): FeatureScanner {
  const judge = new PingJudge(mapping);
  const line = new ValueLine(judge.spans);
  const property = {
    vehicle: propertyOf(mapping, "vehicle_id"),
    time: propertyOf(mapping, "timestamp"),
    speed: propertyOf(mapping, "speed"),
    heading: propertyOf(mapping, "heading"),
  };

  const judged = (text: string): RejectReason | null => {
    const feature = pointFeature(text);
    if (feature === null) return "columns";
    const { properties, lat, lon } = feature;
    line.clear();
    line.put(FIELD.vehicle, propertyText(properties, property.vehicle));
    line.put(FIELD.time, propertyText(properties, property.time));
    line.put(FIELD.lat, String(lat));
    line.put(FIELD.lon, String(lon));
    line.put(FIELD.speed, propertyText(properties, property.speed));
    line.put(FIELD.heading, propertyText(properties, property.heading));
    return judge.judge(line.bytes);
  };

  return new FeatureScanner((text, lineNumber) => {
    const reason = judged(text);
    if (reason !== null) {
      tally.reject(lineNumber, reason, text.slice(0, MAX_REJECT_TEXT));
      return;
    }
    tally.accept();
    const vehicle = names.intern(line.bytes, judge.spans[0], judge.spans[1]);
    batcher.add(vehicle, judge.tMs, judge.lat, judge.lon, judge.speedMs, judge.headingDeg);
  });
}
