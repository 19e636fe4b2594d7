import { describe, expect, test, vi } from "vitest";
import type { Bus, Flushed } from "@/realtime/bus/bus";
import { InProcessBus } from "@/realtime/bus/inProcess";

const buses: readonly [string, () => Promise<Bus>][] = [["in process", () => Promise.resolve(new InProcessBus())]];

const flushed = (pageId: string, n: number, from = "one"): Flushed => ({ pageId, from, seqs: [BigInt(n)], updates: [Uint8Array.of(n)] });

/** What every bus keeps to. */
describe.each(buses)("M1 the bus %s", (_, make) => {
  test("tells each listener of a page each flush once, in order, one's own included", async () => {
    const bus = await make();
    const [a, b]: [Flushed[], Flushed[]] = [[], []];
    bus.listen("p", (f) => a.push(f));
    bus.listen("p", (f) => b.push(f));
    for (const n of [1, 2, 3]) bus.publish(flushed("p", n));
    await vi.waitFor(() => expect(b).toHaveLength(3));
    expect(a.map((f) => f.seqs[0])).toStrictEqual([1n, 2n, 3n]);
    expect(b).toStrictEqual(a);
    expect(a[0]).toStrictEqual(flushed("p", 1));
    await bus.close();
  });

  test("tells nobody of another page", async () => {
    const bus = await make();
    const heard: Flushed[] = [];
    bus.listen("p", (f) => heard.push(f));
    bus.publish(flushed("q", 1));
    bus.publish(flushed("p", 2));
    await vi.waitFor(() => expect(heard).toStrictEqual([flushed("p", 2)]));
    await bus.close();
  });

  test("a listener that fails, or leaves while it is told, harms no other", async () => {
    const bus = await make();
    const quiet = vi.spyOn(console, "error").mockImplementation(() => undefined);
    const heard: number[] = [];
    const leave = bus.listen("p", () => {
      leave();
      throw new Error("broken");
    });
    bus.listen("p", (f) => heard.push(Number(f.seqs[0])));
    bus.publish(flushed("p", 1));
    bus.publish(flushed("p", 2));
    await vi.waitFor(() => expect(heard).toStrictEqual([1, 2]));
    expect(quiet).toHaveBeenCalledOnce();
    quiet.mockRestore();
    await bus.close();
  });

  test("tells nobody who left, and nobody once it is closed", async () => {
    const bus = await make();
    const heard: number[] = [];
    const leave = bus.listen("p", (f) => heard.push(Number(f.seqs[0])));
    bus.publish(flushed("p", 1));
    await vi.waitFor(() => expect(heard).toStrictEqual([1]));
    leave();
    leave();
    bus.publish(flushed("p", 2));
    bus.listen("p", (f) => heard.push(Number(f.seqs[0])));
    await bus.close();
    bus.publish(flushed("p", 3));
    await new Promise((resolve) => setTimeout(resolve, 50));
    expect(heard).toStrictEqual([1]);
  });
});
