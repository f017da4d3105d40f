/** The public surface of the solver. */
export * from "./constants.ts";
export * from "./result.ts";
export * from "./scenario/device.ts";
export * from "./scenario/quantities.ts";
export type * from "./scenario/resolved.ts";
export * from "./scenario/schema.ts";
