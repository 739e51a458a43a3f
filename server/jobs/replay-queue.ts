import PgBoss from 'pg-boss';
import type { Logger } from 'pino';
import type { Database } from '#server/db/connect.ts';
import { computeResult, noteFailure } from '#server/services/runs/compute-result.ts';
import { outdatedRuns, waitingRuns } from '#server/services/runs/outdated-runs.ts';
import { ENGINE_VERSION } from '#shared/pace/run.ts';
import { createReplayThread, type ReplayThread } from './replay-thread.ts';

/**
 * Replays of sealed runs, queued in the database, worked off in a thread. The queue is only the way there: what is due is
 * always told by the runs themselves, so a lost job is found again at the next look.
 */
export interface ReplayQueue {
  /** Queues one run and wakes the worker. */
  ask(runId: string): Promise<void>;
  /** Queues every sealed run without a result of this engine. @returns how many. */
  askOutdated(): Promise<number>;
  /** Lets a running replay end, then stops. */
  stop(): Promise<void>;
}

interface Deps {
  readonly databaseUrl: string;
  readonly db: Database;
  readonly now: () => number;
  readonly logger: Logger;
}

interface Job {
  readonly runId: string;
}

const QUEUE = 'replay';
/** How often lost jobs are looked for. */
const LOOK_MS = 60_000;

export async function startReplayQueue(deps: Deps): Promise<ReplayQueue> {
  const { databaseUrl, db, logger } = deps;
  const boss = new PgBoss({ connectionString: databaseUrl, max: 2, schedule: false, application_name: 'evenline jobs' });
  boss.on('error', (error) => logger.error({ err: error }, 'job queue'));
  await boss.start();
  // 'short': one waiting job a run is enough, however often it is asked for.
  await boss.createQueue(QUEUE, { name: QUEUE, policy: 'short', retryLimit: 2, retryDelay: 1, expireInSeconds: 300 });
  const thread = createReplayThread();
  let stopping = false;
  let batch: Promise<void> = Promise.resolve();
  const workOffAll = async (jobs: PgBoss.JobWithMetadata<Job>[]): Promise<void> => {
    for (const job of jobs) if (!stopping) await workOff(deps, boss, thread, job);
  };
  const worker = await boss.work<Job>(QUEUE, { batchSize: 8, pollingIntervalSeconds: 2, includeMetadata: true }, (jobs) => {
    batch = workOffAll(jobs);
    return batch;
  });

  const ask = async (runId: string): Promise<void> => {
    await boss.send(QUEUE, { runId } satisfies Job, { singletonKey: runId });
    boss.notifyWorker(worker);
  };
  const askOutdated = async (): Promise<number> => {
    const runIds = await outdatedRuns({ db }, ENGINE_VERSION);
    for (const runId of runIds) await ask(runId);
    return runIds.length;
  };
  const look = setInterval(() => {
    waitingRuns({ db }, deps.now() - LOOK_MS)
      .then((runIds) => Promise.all(runIds.map(ask)))
      .catch((error: unknown) => logger.error({ err: error }, 'looking for lost replays'));
  }, LOOK_MS).unref();

  return {
    ask,
    askOutdated,
    async stop() {
      clearInterval(look);
      stopping = true;
      await batch;
      // The replay under way has ended; jobs fetched and not begun go back into the queue.
      await boss.stop({ graceful: false });
      await thread.close();
    },
  };
}

/** One job. A journal that cannot be read is a result too; what throws here is tried again, then told with the run. */
async function workOff(deps: Deps, boss: PgBoss, thread: ReplayThread, job: PgBoss.JobWithMetadata<Job>): Promise<void> {
  const { runId } = job.data;
  try {
    await computeResult(deps, runId, thread.replay);
    await boss.complete(QUEUE, job.id);
  } catch (error) {
    deps.logger.error({ err: error, runId }, 'replay failed');
    if (job.retryCount >= job.retryLimit) await noteFailure(deps, runId, STOPPED_SHORT);
    await boss.fail(QUEUE, job.id, { message: error instanceof Error ? error.message : String(error) });
  }
}

const STOPPED_SHORT = 'The replay stopped short. The journal is safe; the server tries again when it next starts.';
