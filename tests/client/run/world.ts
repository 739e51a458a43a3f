import type { RunChannel, RunEnvironment } from '#src/run/run-environment.ts';
import type { ExclusiveLocks } from '#src/storage/exclusive-lock.ts';

/**
 * The device around its windows, with time in the test's hands: one monotonic clock, one wall clock that may be set, locks and
 * channels across windows. A window that is killed says nothing more, and its locks are free.
 */
export class World {
  /** Milliseconds since the device was switched on. */
  private mono = 5_000;
  private wallOffset = 1_800_000_000_000;
  private timers: { readonly due: number; readonly every: number | null; readonly call: () => void; readonly owner: WindowOf }[] = [];
  private readonly held = new Map<string, WindowOf>();
  private readonly queues = new Map<string, { readonly owner: WindowOf; readonly grant: () => void }[]>();
  private readonly channels = new Set<WorldChannel>();
  private ids = 0;

  window(): WindowOf {
    return new WindowOf(this);
  }

  /** Lets time pass, in steps in which promises settle and timers fire in order. */
  async pass(ms: number): Promise<void> {
    const end = this.mono + ms;
    for (;;) {
      await settled(2);
      const next = this.timers.filter(({ due, owner }) => due <= end && owner.alive).sort((a, b) => a.due - b.due)[0];
      if (next === undefined) break;
      this.timers.splice(this.timers.indexOf(next), 1);
      this.mono = Math.max(this.mono, next.due);
      if (next.every !== null) this.timers.push({ ...next, due: next.due + next.every });
      next.call();
    }
    this.mono = end;
    await settled();
  }

  /** The device sleeps: the wall goes on, the monotonic clock and every timer stand still. */
  sleep(ms: number): void {
    this.wallOffset += ms;
  }

  /** Somebody sets the wall clock. */
  stepWall(ms: number): void {
    this.wallOffset += ms;
  }

  now = (): number => this.mono;
  wall = (): number => this.mono + this.wallOffset;
  newId = (): string => `00000000-0000-7000-8000-${String(++this.ids).padStart(12, '0')}`;

  addTimer(owner: WindowOf, ms: number, every: number | null, call: () => void): () => void {
    const timer = { due: this.mono + ms, every, call, owner };
    this.timers.push(timer);
    let gone = false;
    return () => {
      if (gone) return;
      gone = true;
      this.timers = this.timers.filter((other) => other.call !== call || other.owner !== owner);
    };
  }

  take(owner: WindowOf, name: string): (() => void) | null {
    if (this.held.has(name)) return null;
    this.held.set(name, owner);
    return () => this.release(owner, name);
  }

  wait(owner: WindowOf, name: string, signal: AbortSignal): Promise<(() => void) | null> {
    const free = this.take(owner, name);
    if (free !== null) return Promise.resolve(free);
    return new Promise((resolve) => {
      const queue = this.queues.get(name) ?? [];
      this.queues.set(name, queue);
      const entry = { owner, grant: () => resolve(this.take(owner, name)) };
      queue.push(entry);
      signal.addEventListener('abort', () => {
        if (!queue.includes(entry)) return;
        queue.splice(queue.indexOf(entry), 1);
        resolve(null);
      });
    });
  }

  private release(owner: WindowOf, name: string): void {
    if (this.held.get(name) !== owner) return;
    this.held.delete(name);
    const queue = this.queues.get(name) ?? [];
    const next = queue.find((entry) => entry.owner.alive);
    if (next === undefined) return;
    queue.splice(queue.indexOf(next), 1);
    next.grant();
  }

  releaseAll(owner: WindowOf): void {
    for (const [name, holder] of [...this.held]) if (holder === owner) this.release(owner, name);
    for (const channel of [...this.channels]) if (channel.owner === owner) channel.close();
  }

  open(channel: WorldChannel): void {
    this.channels.add(channel);
  }

  shut(channel: WorldChannel): void {
    this.channels.delete(channel);
  }

  deliver(from: WorldChannel, message: unknown): void {
    const data = structuredClone(message);
    const others = [...this.channels].filter((other) => other !== from && other.name === from.name);
    // As a real channel: later, in order, and to whoever is still there.
    void Promise.resolve().then(() => {
      for (const other of others) if (this.channels.has(other)) other.onmessage?.({ data } as MessageEvent);
    });
  }
}

class WorldChannel implements RunChannel {
  onmessage: ((event: MessageEvent) => void) | null = null;
  constructor(
    private readonly world: World,
    readonly owner: WindowOf,
    readonly name: string,
  ) {
    world.open(this);
  }
  postMessage(message: unknown): void {
    if (this.owner.alive) this.world.deliver(this, message);
  }
  close(): void {
    this.world.shut(this);
  }
}

export class WindowOf {
  alive = true;
  private readonly hidden = new Set<() => void>();
  private readonly locks: ExclusiveLocks;

  constructor(private readonly world: World) {
    this.locks = {
      take: async (name) => world.take(this, name),
      wait: (name, signal) => world.wait(this, name, signal),
    };
  }

  /** A window of its own has a monotonic origin of its own. */
  environment(originMs = 0): RunEnvironment {
    const { world } = this;
    return {
      clocks: { mono: () => world.now() - originMs, wall: world.wall },
      locks: this.locks,
      every: (ms, tick) => world.addTimer(this, ms, ms, tick),
      after: (ms, then) => world.addTimer(this, ms, null, then),
      nextFrame: (paint) => void world.addTimer(this, 16, null, paint),
      onHide: (call) => {
        this.hidden.add(call);
        return () => this.hidden.delete(call);
      },
      channel: (name) => new WorldChannel(world, this, name),
      newId: world.newId,
    };
  }

  hide(): void {
    for (const call of this.hidden) call();
  }

  kill(): void {
    this.alive = false;
    this.world.releaseAll(this);
  }
}

/** Lets everything that can go on without time passing go on: promises, and the database double's own turns. */
export async function settled(turns = 12): Promise<void> {
  for (let i = 0; i < turns; i++) await new Promise<void>((resolve) => setImmediate(resolve));
}
