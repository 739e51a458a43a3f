import { eq } from 'drizzle-orm';
import { entries } from '#server/db/schema/entries.ts';
import { requireTeam } from '#server/services/access/require-team.ts';
import type { ServiceContext } from '#server/services/context.ts';
import type { RunsResponse } from '#shared/api/runs.ts';
import { runSummaries } from './run-summaries.ts';

export async function listRuns(ctx: ServiceContext, teamId: string): Promise<RunsResponse> {
  await requireTeam(ctx, teamId, 'runs.read');
  return { runs: await runSummaries(ctx, eq(entries.teamId, teamId)) };
}
