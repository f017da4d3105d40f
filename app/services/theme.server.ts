import { createCookie } from "react-router";
import { z } from "zod";

export const themeSchema = z.enum(["auto", "light", "dark"]);

/** Kept in a cookie so that the first paint has the right colours; no secret, so no prefix. */
export const themeCookie = createCookie("theme", { path: "/", sameSite: "lax", httpOnly: true, maxAge: 31_536_000 });

export async function readTheme(request: Request) {
  const parsed = themeSchema.safeParse(await themeCookie.parse(request.headers.get("cookie")));
  return parsed.success ? parsed.data : "auto";
}
