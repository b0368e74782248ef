import { fieldsOf, type UploadKind } from "@/domain/upload";
import { FeatureScanner } from "../geojson/feature-scanner";
import { pointFeature, propertyText, type PointFeature } from "../geojson/point-feature";
import { unusable } from "../unusable";
import { columnsFromHeader } from "./synonyms";

export interface GeojsonShape {
  /** Names of the properties of the first features. */
  header: string[];
  features: PointFeature[];
  rows: string[][];
  /** Field to property name. */
  columns: Record<string, string>;
}

const MAX_FEATURES = 5000;
const FEATURES_FOR_HEADER = 50;

export function geojsonShape(bytes: Uint8Array, kind: UploadKind, isWhole: boolean): GeojsonShape {
  const features: PointFeature[] = [];
  const scanner = new FeatureScanner((text) => {
    const feature = features.length < MAX_FEATURES ? pointFeature(text) : null;
    if (feature !== null) features.push(feature);
  });
  scanner.push(bytes);
  if (isWhole) scanner.finish();
  if (features.length === 0) throw unusable("The GeoJSON holds no features that can be read.");
  const header = [...new Set(features.slice(0, FEATURES_FOR_HEADER).flatMap((feature) => Object.keys(feature.properties)))];
  const rows = features.map(({ properties }) => header.map((name) => propertyText(properties, name)));
  return { header, features, rows, columns: propertiesOf(header, kind) };
}

/** Latitude and longitude come from the geometry. */
function propertiesOf(header: string[], kind: UploadKind): Record<string, string> {
  const numbers = columnsFromHeader(header, kind);
  const named = fieldsOf(kind, "geojson").filter((field) => numbers[field] !== undefined);
  return Object.fromEntries(named.map((field) => [field, header[numbers[field]]]));
}
