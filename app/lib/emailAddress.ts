/**
 * The one form of an address in which it is stored, compared and written to: NFKC, trimmed, lower case.
 * @returns undefined for what is not one plain address (no lists, names, quotes, comments or line breaks)
 */
export function normaliseEmail(typed: unknown): string | undefined {
  if (typeof typed !== "string" || /\p{Cc}/u.test(typed)) return undefined;
  const address = typed.normalize("NFKC").trim().toLowerCase();
  const plain = /^[^\s@<>()[\]\\,;:"\p{Cc}]{1,64}@[\p{L}\p{N}-]+(\.[\p{L}\p{N}-]+)+$/u;
  return address.length <= 254 && plain.test(address) ? address : undefined;
}
