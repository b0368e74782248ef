import { boolean, doublePrecision, index, integer, jsonb, pgTable, real, serial, text, uniqueIndex } from "drizzle-orm/pg-core";
import { TURNS } from "@/core/types";
import { junctions } from "./junctions";

const ORIGINS = ["derived", "given", "set"] as const;

export const exits = pgTable(
  "exits",
  {
    id: serial("id").primaryKey(),
    /** Identity that the core carries from upload to upload. */
    code: text("code").notNull(),
    junctionId: integer("junction_id").notNull().references(() => junctions.id, { onDelete: "cascade" }),
    bearingDeg: real("bearing_deg").notNull(),
    /** East and north metres from the junction, x then y for each vertex, outwards. */
    line: doublePrecision("line").array().notNull(),
    support: integer("support").notNull(),
    methodVersion: integer("method_version").notNull(),
  },
  (t) => [uniqueIndex("exits_code_key").on(t.code), index("exits_junction_idx").on(t.junctionId)],
);

export const legs = pgTable(
  "legs",
  {
    id: serial("id").primaryKey(),
    code: text("code").notNull(),
    junctionId: integer("junction_id").notNull().references(() => junctions.id, { onDelete: "cascade" }),
    name: text("name").notNull(),
    bearingDeg: real("bearing_deg").notNull(),
    /** East and north metres from the junction, from the stop line upstream. */
    line: doublePrecision("line").array().notNull(),
    upstreamExitId: integer("upstream_exit_id").references(() => exits.id, { onDelete: "set null" }),
    storageM: real("storage_m"),
    freeSpeedMs: real("free_speed_ms"),
    speedLimitMs: real("speed_limit_ms"),
    lanes: integer("lanes"),
    origin: text("origin", { enum: ORIGINS }).notNull(),
    stopLineOrigin: text("stop_line_origin", { enum: [...ORIGINS, "default"] }).notNull(),
    locked: boolean("locked").notNull().default(false),
    support: integer("support").notNull(),
    doubts: jsonb("doubts").$type<string[]>().notNull(),
    methodVersion: integer("method_version").notNull(),
  },
  (t) => [uniqueIndex("legs_code_key").on(t.code), index("legs_junction_idx").on(t.junctionId)],
);

export const movements = pgTable(
  "movements",
  {
    id: serial("id").primaryKey(),
    code: text("code").notNull(),
    legId: integer("leg_id").notNull().references(() => legs.id, { onDelete: "cascade" }),
    exitId: integer("exit_id").notNull().references(() => exits.id, { onDelete: "cascade" }),
    turnDeg: real("turn_deg").notNull(),
    turn: text("turn", { enum: TURNS }).notNull(),
    referenceS: real("reference_s"),
    referenceSource: text("reference_source", { enum: ["unstopped", "shrunk", "free-speed"] }).notNull(),
    referenceN: integer("reference_n").notNull(),
    cordonUpM: real("cordon_up_m").notNull(),
    cordonDownM: real("cordon_down_m").notNull(),
    methodVersion: integer("method_version").notNull(),
  },
  (t) => [uniqueIndex("movements_code_key").on(t.code), index("movements_leg_idx").on(t.legId)],
);
