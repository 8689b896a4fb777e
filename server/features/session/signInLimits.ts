import { ipKeyGenerator, MemoryStore } from "express-rate-limit";
import { TooManyRequests } from "../../http/problem.ts";

const WINDOW_MS = 15 * 60 * 1000;
const FAILURES_PER_EMAIL = 10;
const FAILURES_PER_ADDRESS = 60;

function store(): MemoryStore {
  const memory = new MemoryStore();
  memory.init({ windowMs: WINDOW_MS } as never);
  return memory;
}

/** Slows down whoever guesses passwords: counts attempts before they are tried, and takes back those that succeed. */
export class SignInLimits {
  private readonly emails = store();
  private readonly addresses = store();

  /** @throws TooManyRequests when this e-mail or network address failed too often in the last quarter of an hour. */
  async attempt(email: string, ip: string): Promise<void> {
    const byEmail = await this.emails.increment(email);
    const byAddress = await this.addresses.increment(ipKeyGenerator(ip));
    const waits = [
      byEmail.totalHits > FAILURES_PER_EMAIL ? byEmail.resetTime : undefined,
      byAddress.totalHits > FAILURES_PER_ADDRESS ? byAddress.resetTime : undefined,
    ].flatMap((reset) => (reset ? [Math.max(1, Math.ceil((reset.getTime() - Date.now()) / 1000))] : []));
    if (waits.length > 0) {
      throw new TooManyRequests("Too many failed sign-ins. Wait a while before the next.", Math.max(...waits));
    }
  }

  async succeeded(email: string, ip: string): Promise<void> {
    await this.emails.resetKey(email);
    await this.addresses.decrement(ipKeyGenerator(ip));
  }

  close(): void {
    this.emails.shutdown();
    this.addresses.shutdown();
  }
}
