/**
 * Loaded into a child before its own code: when the program that started it is gone, however it went, the child stops too.
 * The kernel closes the channel between them, so this holds even for a parent that was killed outright.
 */
const GRACE_MS = 8000;

if (process.channel) {
  process.once('disconnect', () => {
    process.kill(process.pid, 'SIGTERM');
    setTimeout(() => process.exit(1), GRACE_MS).unref();
  });
  process.channel.unref();
}
