import { findLabByName, type Lab } from "./labs.server";

/** The invented lab that the demo opens into. */
export const demoLabName = "Halden thin-film group";

export const findDemoLab = (): Promise<Lab | undefined> => findLabByName(demoLabName);
