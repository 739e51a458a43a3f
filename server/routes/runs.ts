import type { Request } from 'express';
import { ServiceError } from '#server/service-error.ts';
import { appendChunk, type Chunk } from '#server/services/runs/append-chunk.ts';
import { createRun } from '#server/services/runs/create-run.ts';
import { exportJournal } from '#server/services/runs/export-journal.ts';
import { getRun } from '#server/services/runs/get-run.ts';
import { heldChunks } from '#server/services/runs/held-chunks.ts';
import { sealRun } from '#server/services/runs/seal-run.ts';
import { digestSchema } from '#shared/api/fields.ts';
import { runHeaderSchema } from '#shared/api/run-header.ts';
import { DIGEST_HEADER, sealRequestSchema } from '#shared/api/runs.ts';
import { answer, idParam, NO_CONTENT, numberFrom, parseBody, type Route } from './route.ts';

function chunkOf(request: Request): Chunk {
  const digest = digestSchema.safeParse(request.get(DIGEST_HEADER));
  const bytes: unknown = request.body;
  if (!digest.success) throw new ServiceError('INVALID_REQUEST', `Send the chunk's digest in ${DIGEST_HEADER}: 64 hex digits.`);
  if (!Buffer.isBuffer(bytes)) throw new ServiceError('UNSUPPORTED_CONTENT_TYPE', 'Send a chunk as application/octet-stream.');
  return { n: numberFrom(request.params['n']) ?? 0, bytes, digest: digest.data };
}

export const runRoutes: readonly Route[] = [
  {
    method: 'put',
    path: '/runs/:id',
    access: 'run.upload',
    body: 'json',
    async handle({ ctx, request }) {
      const { created, held } = await createRun(ctx, idParam(request, 'id'), parseBody(runHeaderSchema, request));
      return answer(held, created ? 201 : 200);
    },
  },
  {
    method: 'get',
    path: '/runs/:id/chunks',
    access: 'run.upload',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await heldChunks(ctx, idParam(request, 'id'))),
  },
  {
    method: 'put',
    path: '/runs/:id/chunks/:n',
    access: 'run.upload',
    body: 'octets',
    async handle({ ctx, request }) {
      const { added, held } = await appendChunk(ctx, idParam(request, 'id'), chunkOf(request));
      return added ? answer(held, 201) : NO_CONTENT;
    },
  },
  {
    method: 'post',
    path: '/runs/:id/seal',
    access: 'run.upload',
    body: 'json',
    handle: async ({ ctx, request }) => answer(await sealRun(ctx, idParam(request, 'id'), parseBody(sealRequestSchema, request)), 202),
  },
  {
    method: 'get',
    path: '/runs/:id',
    access: 'runs.read',
    body: 'none',
    handle: async ({ ctx, request }) => answer(await getRun(ctx, idParam(request, 'id'))),
  },
  {
    method: 'get',
    path: '/runs/:id/journal',
    access: 'runs.read',
    body: 'none',
    async handle({ ctx, request, response }) {
      const runId = idParam(request, 'id');
      const text = await exportJournal(ctx, runId);
      response.attachment(`evenline-${runId}.ndjson`).type('application/x-ndjson').send(text);
      return { sent: true };
    },
  },
];
