import { Session } from 'node:inspector/promises';

/** Where the time goes: the sampling profiler of this very process; nothing is written anywhere. */

export interface ProfileRow {
  readonly name: string;
  readonly place: string;
  /** Share of the sampled time spent in the function itself. */
  readonly share: number;
}

const SAMPLE_US = 200;

export async function profileOf(work: () => void, rows = 18): Promise<ProfileRow[]> {
  const session = new Session();
  session.connect();
  try {
    await session.post('Profiler.enable');
    await session.post('Profiler.setSamplingInterval', { interval: SAMPLE_US });
    await session.post('Profiler.start');
    work();
    const { profile } = await session.post('Profiler.stop');
    const { samples = [], timeDeltas = [] } = profile;
    // what the profiler itself spends on starting and stopping is no part of the work
    const nodes = profile.nodes.filter(({ callFrame }) => callFrame.url !== '' || callFrame.functionName === '(garbage collector)');
    const self = new Map<number, number>();
    samples.forEach((id, i) => {
      self.set(id, (self.get(id) ?? 0) + (timeDeltas[i] ?? 0));
    });
    const total = nodes.reduce((sum, { id }) => sum + (self.get(id) ?? 0), 0);
    const byFunction = new Map<string, ProfileRow>();
    for (const node of nodes) {
      const { functionName, url } = node.callFrame;
      const place = url.replace(/^.*\/(shared|tests|node_modules)\//, '$1/').replace(/\?.*$/, '');
      const key = `${functionName} ${place}`;
      const share = (byFunction.get(key)?.share ?? 0) + (self.get(node.id) ?? 0) / total;
      byFunction.set(key, { name: functionName === '' ? '(no name)' : functionName, place, share });
    }
    return [...byFunction.values()].sort((a, b) => b.share - a.share).slice(0, rows);
  } finally {
    session.disconnect();
  }
}

export function profileTable(rows: readonly ProfileRow[]): string {
  const width = Math.max(...rows.map(({ name }) => name.length));
  return rows.map(({ name, place, share }) => `${(share * 100).toFixed(1).padStart(5)} %  ${name.padEnd(width)}  ${place}`).join('\n');
}
