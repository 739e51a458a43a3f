/** The countdown's ticks, by WebAudio: exact, and nothing to load. Muted ticks stay silent; no sound is no fault. */
let context: AudioContext | null = null;

/** A browser lets sound out only after a touch; call it from one. */
export function wakeSound(): void {
  try {
    context ??= new AudioContext();
    void context.resume();
  } catch {
    context = null;
  }
}

const TICK_S = 0.09;

/** `high` at the release itself. */
export function tick(high: boolean): void {
  if (context === null || context.state !== 'running') return;
  const start = context.currentTime;
  const oscillator = context.createOscillator();
  const gain = context.createGain();
  oscillator.frequency.value = high ? 1320 : 880;
  gain.gain.setValueAtTime(0.6, start);
  gain.gain.exponentialRampToValueAtTime(0.001, start + (high ? 4 : 1) * TICK_S);
  oscillator.connect(gain).connect(context.destination);
  oscillator.start(start);
  oscillator.stop(start + (high ? 4 : 1) * TICK_S);
}
