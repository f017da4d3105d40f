import type { Mail } from "./mail.server";

/** Subjects are fixed: nothing that anybody typed gets into a header. */
export function signInMail(to: string, code: string, link: string): Mail {
  return {
    to,
    subject: "Your sign-in code for Demilune",
    text: [
      `Your code is ${code.slice(0, 4)} ${code.slice(4)}. It works once, within ten minutes, in the browser that asked for it.`,
      `You can also open this page in that browser and press the button there:\n${link}`,
      "If you did not ask for a code, leave this mail alone: without it nobody gets in.",
    ].join("\n\n"),
  };
}
