import type { Response } from 'supertest';

/** Reads a body whose type the client does not know as text: `.buffer(true).parse(asText)`. */
export function asText(response: Response, done: (error: Error | null, body: string) => void): void {
  // While a parser runs, what it is given is the stream of the answer.
  const stream = response as unknown as NodeJS.ReadableStream;
  const parts: Buffer[] = [];
  stream.on('data', (part: Buffer) => parts.push(part));
  stream.on('end', () => done(null, Buffer.concat(parts).toString('utf8')));
}
