export * from "./users";
export * from "./settings";
export * from "./audit-events";
export * from "./junctions";
export * from "./legs";
export * from "./uploads";
export * from "./traversals";
export * from "./reports";
