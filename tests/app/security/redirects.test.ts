import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { normaliseEmail } from "~/lib/emailAddress";
import { safeRedirect } from "~/services/redirects.server";

describe("safeRedirect", () => {
  it.each([
    "//elsewhere.example",
    "/\\elsewhere.example",
    "https://elsewhere.example",
    "javascript:alert(1)",
    "/..//elsewhere.example",
    "/\t/elsewhere.example",
    "",
    null,
    7,
  ])("does not go to %j", (to) => {
    expect(safeRedirect(to, "/home")).toBe("/home");
  });

  it("goes to places on this site", () => {
    expect(safeRedirect("/lab/1?sort=name#top")).toBe("/lab/1?sort=name#top");
  });

  it("stays on the site for whatever text", () => {
    const pieces = fc.array(
      fc.constantFrom(
        "/",
        "\\",
        ".",
        "..",
        "@",
        ":",
        "?",
        "#",
        "%2f",
        "%5c",
        "\t",
        "\n",
        " ",
        "elsewhere.example",
        "http",
      ),
    );
    fc.assert(
      fc.property(
        fc.oneof(
          fc.string({ unit: "binary" }),
          pieces.map((list) => `/${list.join("")}`),
        ),
        (text) => {
          const url = new URL(safeRedirect(text), "https://demilune.example");
          expect(url.origin).toBe("https://demilune.example");
        },
      ),
      { numRuns: 5000 },
    );
  });
});

describe("normaliseEmail", () => {
  it("gives every spelling of an address one form", () => {
    for (const typed of ["Astrid@Halden.Example", "  astrid@halden.example ", "ＡＳＴＲＩＤ@halden.example"])
      expect(normaliseEmail(typed)).toBe("astrid@halden.example");
  });

  it("leaves what it gives as it is, and lets nothing through that could reach a mail's header", () => {
    fc.assert(
      fc.property(fc.oneof(fc.emailAddress(), fc.string({ unit: "binary" })), (typed) => {
        const address = normaliseEmail(typed);
        if (address === undefined) return;
        expect(normaliseEmail(address)).toBe(address);
        expect(address).not.toMatch(/[\s,;<>"()\\]|\p{Cc}/u);
        expect(address.length).toBeLessThanOrEqual(254);
      }),
      { numRuns: 2000 },
    );
  });
});
