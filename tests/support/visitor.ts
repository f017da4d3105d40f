/** A browser without a screen: keeps cookies, sends what a browser's form sends, follows nothing by itself. */
export class Visitor {
  readonly cookies = new Map<string, string>();

  /** @param client the network address a trusted proxy would report */
  constructor(
    readonly origin: string,
    private readonly client?: string,
  ) {}

  async request(method: string, path: string, options: { form?: Record<string, string>; headers?: HeadersInit } = {}) {
    const headers = new Headers(options.headers);
    if (this.client) headers.set("x-forwarded-for", this.client);
    if (method !== "GET" && !headers.has("origin")) headers.set("origin", this.origin);
    if (this.cookies.size > 0)
      headers.set("cookie", [...this.cookies].map(([name, value]) => `${name}=${value}`).join("; "));
    const response = await fetch(this.origin + path, {
      method,
      headers,
      body: options.form && new URLSearchParams(options.form),
      redirect: "manual",
    });
    for (const line of response.headers.getSetCookie()) {
      const [, name, value] = /^([^=]+)=([^;]*)/.exec(line)!;
      if (/max-age=0(;|$)/i.test(line)) this.cookies.delete(name);
      else this.cookies.set(name, value);
    }
    return response;
  }

  get(path: string, headers?: HeadersInit) {
    return this.request("GET", path, { headers });
  }

  post(path: string, form: Record<string, string> = {}, headers?: HeadersInit) {
    return this.request("POST", path, { form, headers });
  }

  /** Enters the demo lab in a role; the entrance leads to a scenario, returned is the lab's path. */
  async enterDemo(role: "owner" | "researcher" | "viewer"): Promise<string> {
    const response = await this.post("/demo", { role });
    if (response.status !== 303) throw new Error(`The demo entrance answered ${response.status}`);
    return /^\/lab\/[^/]+/.exec(response.headers.get("location")!)![0];
  }
}
