/**
 * Sign-in by a code sent by mail, on remix-auth with remix-auth-totp.
 *
 * The package keeps its state in a plain cookie that names the address: whoever edits the cookie signs in as somebody
 * else, wrong codes are not counted, and a code works again and again. So its cookie never reaches a browser. The
 * browser holds a random challenge id and nothing else; a row of `login_challenges` holds the package's state and is
 * the authority on address, attempts, age and single use; the package is given back its own state when a code comes in.
 */
import { createHmac, randomBytes, timingSafeEqual } from "node:crypto";
import { Authenticator } from "remix-auth";
import { TOTPStrategy } from "remix-auth-totp";
import { normaliseEmail } from "~/lib/emailAddress";
import { countAttempt, createChallenge, spendChallenge } from "~/models/loginChallenges.server";
import { consume } from "~/models/rateLimits.server";
import { ensureUser, findUserByEmail, type User } from "~/models/users.server";
import { limits } from "./limits.server";
import { log } from "./log.server";
import { sendMail } from "./mail/mail.server";
import { signInMail } from "./mail/templates.server";
import { settings } from "./settings.server";

export const codeLifetimeMs = 600_000;
const stateCookie = "_totp";

const mac = (...parts: string[]) => createHmac("sha256", settings().secret()).update(parts.join("\n")).digest();

type SendCode = ConstructorParameters<typeof TOTPStrategy>[0]["sendTOTP"];

/** Runs the package's strategy for one address and one challenge; its redirects are its answers. */
async function runStrategy(
  email: string,
  challengeId: string,
  request: { form: Record<string, string>; state?: string },
  sendTOTP: SendCode = async () => {},
) {
  let provenEmail: string | undefined;
  const strategy = new TOTPStrategy<{ email: string }>(
    {
      secret: mac("one-time password", email, challengeId).toString("hex"),
      totpGeneration: { digits: 8, charSet: "0123456789", period: codeLifetimeMs / 1000 },
      emailSentRedirect: "/sent",
      successRedirect: "/proven",
      failureRedirect: "/failed",
      sendTOTP,
      validateEmail: async () => true,
    },
    async ({ email }) => {
      provenEmail = email;
      return { email };
    },
  );
  const answer = await new Authenticator<{ email: string }>()
    .use(strategy, "code")
    .authenticate(
      "code",
      new Request(settings().origin, {
        method: "POST",
        body: new URLSearchParams(request.form),
        headers: request.state ? { Cookie: `${stateCookie}=${request.state}` } : {},
      }),
    )
    .catch((thrown: unknown) => {
      if (thrown instanceof Response) return thrown;
      throw thrown;
    });
  const cookie = answer instanceof Response ? answer.headers.getSetCookie()[0] : undefined;
  return { provenEmail, state: cookie && /^_totp=([^;]*)/.exec(cookie)?.[1] };
}

export type Asked = { outcome: "asked"; challengeId: string } | { outcome: "notAnAddress" | "tooOften" };

/**
 * Makes a challenge for the address and sends its code. What the caller learns is the same whether or not somebody
 * has this address.
 * @param client the network address of whoever asks
 */
export async function askForCode(typed: unknown, redirectTo: string, client: string): Promise<Asked> {
  const email = normaliseEmail(typed);
  if (!email) return { outcome: "notAnAddress" };
  const { askCode } = limits;
  const allowed =
    (await consume(`ask:client:${client}`, askCode.client)) &&
    (await consume(`ask:address:${email}`, askCode.address)) &&
    (await consume("ask:everybody", askCode.everybody));
  if (!allowed) {
    log.warn({ event: "codeRefused", reason: "tooOften", ip: client });
    return { outcome: "tooOften" };
  }
  const challengeId = randomBytes(32).toString("base64url");
  const now = new Date();
  let code = "";
  const { state } = await runStrategy(email, challengeId, { form: { email } }, async (made) => {
    code = made.code;
  });
  if (!state || !code) throw new Error("The one-time-password package made no code.");
  await createChallenge(challengeId, {
    email,
    codeMac: mac("code", challengeId, code).toString("hex"),
    state,
    redirectTo,
    createdAt: now,
    expiresAt: new Date(now.getTime() + codeLifetimeMs),
  });
  // Not awaited: how long the mail server takes must not tell whether the address is known.
  void deliver(email, code);
  return { outcome: "asked", challengeId };
}

async function deliver(email: string, code: string) {
  try {
    if (!settings().signUp && !(await findUserByEmail(email))) return;
    await sendMail(signInMail(email, code, `${settings().origin}/sign-in/code?code=${code}`));
    log.info({ event: "codeSent" });
  } catch (error) {
    log.error({ event: "mailFailed", error: error instanceof Error ? error.message : String(error) });
  }
}

export type Checked =
  | { outcome: "signedIn"; user: User; redirectTo: string }
  | { outcome: "wrong" | "ended" | "tooOften" };

/** Compares a typed code with its challenge: counted first, compared after, used once. */
export async function checkCode(challengeId: string, typed: unknown, client: string): Promise<Checked> {
  const refuse = (outcome: "wrong" | "ended" | "tooOften"): Checked => {
    log.warn({ event: "signInFailed", reason: outcome, ip: client });
    return { outcome };
  };
  if (!(await consume(`check:client:${client}`, limits.checkCode.client))) return refuse("tooOften");
  const now = new Date();
  const challenge = await countAttempt(challengeId, limits.checkCode.challenge, now);
  if (!challenge) return refuse("ended");
  if (!(await consume(`check:address:${challenge.email}`, limits.checkCode.address))) return refuse("tooOften");
  const code = typeof typed === "string" ? typed.replace(/[\s-]/g, "") : "";
  const isRight = timingSafeEqual(mac("code", challengeId, code), Buffer.from(challenge.codeMac, "hex"));
  if (!isRight) return refuse("wrong");
  const { provenEmail } = await runStrategy(challenge.email, challengeId, { form: { code }, state: challenge.state });
  if (provenEmail !== challenge.email) return refuse("wrong");
  if (!(await spendChallenge(challengeId, now))) return refuse("ended");
  const known = await findUserByEmail(challenge.email);
  const user =
    known ?? (settings().signUp ? await ensureUser(challenge.email, challenge.email.split("@", 1)[0]) : undefined);
  if (!user || user.disabledAt) return refuse("wrong");
  log.info({ event: "signedIn", actorId: user.id, ip: client });
  return { outcome: "signedIn", user, redirectTo: challenge.redirectTo };
}
