import { randomBytes } from "node:crypto";

const alphabet = "0123456789ABCDEFGHJKMNPQRSTVWXYZ";

/**
 * A new identifier: 48 bits of time and 80 random bits as 26 characters of Crockford's base 32, so that
 * identifiers sort by time of creation. It is a name, not a secret: whoever knows it may still be refused.
 */
export function newId(now = Date.now()): string {
  let number = (BigInt(now) << 80n) | BigInt(`0x${randomBytes(10).toString("hex")}`);
  let text = "";
  for (let place = 0; place < 26; place++) {
    text = alphabet[Number(number & 31n)] + text;
    number >>= 5n;
  }
  return text;
}
