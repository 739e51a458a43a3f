import type { NewObservation } from '#shared/journal/observation.ts';
import { aheadMs, type DeviceClocks, type SessionClock } from './clock.ts';
import { type BestExchange, type ExchangeResult, exchangeResult, leastDelay } from './official-clock.ts';

const EXCHANGES = 16;

/** Up to sixteen exchanges one behind the other; stops early when the connection is gone or `go` turns false. */
export async function checkOfficialClock(
  ask: () => Promise<{ readonly t2: number; readonly t3: number } | null>,
  clocks: DeviceClocks,
  go: () => boolean,
): Promise<BestExchange | null> {
  const results: ExchangeResult[] = [];
  for (let i = 0; i < EXCHANGES && go(); i++) {
    const t1 = clocks.mono();
    const stamps = await ask().catch(() => null);
    const t4 = clocks.mono();
    if (stamps === null) break;
    results.push(exchangeResult({ t1, ...stamps, t4 }));
  }
  return leastDelay(results);
}

/** What the exchange says about now, to be journalled. A session clock that runs faster takes official time along with it. */
export function clockSample({ offset, sigma }: BestExchange, clock: SessionClock, clocks: DeviceClocks): NewObservation {
  const mono = clocks.mono();
  const at = clock.at(mono);
  return {
    type: 'clock.v1',
    at,
    source: 'exchange',
    officialMs: mono + offset + aheadMs(at, clock.rate),
    uncertaintyMs: sigma,
  };
}
