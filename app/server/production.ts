/** The input of the server bundle. */
import * as build from "virtual:react-router/server-build";
import { run } from "./main";

/** The routes, for the test that asks every one of them. */
export { build };
export const serve = (): Promise<void> => run(build);
