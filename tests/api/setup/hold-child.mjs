import { startChild } from '#server/setup/child.mjs';

/** Starts a child that would live for ever, and says its process id. */
const script = "setInterval(() => {}, 1000); process.on('SIGTERM', () => process.exit(0)); console.error('up')";
const child = startChild(['-e', script], { cwd: process.cwd(), env: process.env });
console.log(child.pid);
process.stdin.once('data', async () => {
  await child.stop();
  process.exit(0);
});
