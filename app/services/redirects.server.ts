/**
 * A place on this site to go to, or the fallback. The last condition is needed because `/..//elsewhere` normalises
 * to `//elsewhere`, which a browser reads as another host.
 */
export function safeRedirect(to: unknown, fallback = "/"): string {
  if (typeof to !== "string" || !/^\/(?![/\\])[^\\\p{Cc}]*$/u.test(to)) return fallback;
  const url = new URL(to, "http://site");
  const path = url.pathname + url.search + url.hash;
  return url.origin === "http://site" && !path.startsWith("//") ? path : fallback;
}
