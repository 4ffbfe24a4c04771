import type { ObjectStore } from "@/storage/port";

type Method = keyof ObjectStore;

export interface FaultPlan {
  /** The n-th call, counted from 1 over all methods, fails. */
  failCall?: number;
  error?: () => Error;
  /** `before`: nothing was done. `after`: it was done, and the answer was lost. */
  when?: "before" | "after";
  /** Keys that lists leave out, as a store that lags behind would. */
  hiddenFromList?: (key: string) => boolean;
}

/** Wraps a store so that one chosen call fails. The plan can be changed between operations. */
export function faultyStore(inner: ObjectStore, plan: FaultPlan) {
  const calls: Method[] = [];
  async function run<T>(method: Method, act: () => Promise<T>): Promise<T> {
    calls.push(method);
    const fails = calls.length === plan.failCall;
    const failure = plan.error ?? (() => new Error(`injected failure of ${method}`));
    if (fails && plan.when !== "after") throw failure();
    const result = await act();
    if (fails) throw failure();
    return result;
  }
  const store: ObjectStore = {
    check: () => run("check", () => inner.check()),
    create: (...args) => run("create", () => inner.create(...args)),
    stat: (...args) => run("stat", () => inner.stat(...args)),
    get: (...args) =>
      run("get", async () => {
        const opened = await inner.get(...args);
        if (calls.length === plan.failCall) opened.body.destroy();
        return opened;
      }),
    remove: (...args) => run("remove", () => inner.remove(...args)),
    list: (...args) =>
      run("list", async () => {
        const page = await inner.list(...args);
        return { ...page, objects: page.objects.filter(({ key }) => !plan.hiddenFromList?.(key)) };
      }),
    signedGet: (...args) => run("signedGet", () => inner.signedGet(...args)),
    removeUnfinished: (...args) => run("removeUnfinished", () => inner.removeUnfinished(...args)),
  };
  return { store, calls };
}
