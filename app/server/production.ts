/** The input of the server bundle. */
import * as build from "virtual:react-router/server-build";
import { type Running, run, start } from "./main";

export { build };
export const serve = (): Promise<void> => run(build);
export const startForTests = (): Promise<Running> => start(build);
