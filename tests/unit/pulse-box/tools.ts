import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';

/** Compilers and the simulator come from Debian and are no part of the set-up: what needs them is skipped where they are absent. */
const runs = (command: string, args: readonly string[], input = ''): boolean => spawnSync(command, args, { input }).status === 0;

export const hasCompiler = runs('cc', ['--version']);
export const hasAvrCompiler =
  runs('avr-gcc', ['--version']) && runs('avr-gcc', ['-mmcu=atmega328p', '-E', '-'], '#include <avr/io.h>\n#include <util/atomic.h>\n');
const hasSimulator = hasCompiler && runs('cc', ['-E', '-'], '#include <simavr/sim_avr.h>\n#include <libelf.h>\n');
export const canSimulate = hasAvrCompiler && hasSimulator;

export const compilerNote = hasCompiler ? '' : ' (skipped: no C compiler; apt install gcc libc6-dev)';
export const avrNote = hasAvrCompiler ? '' : ' (skipped: no AVR compiler; apt install gcc-avr avr-libc)';
export const simulatorNote = canSimulate ? '' : ' (skipped: apt install gcc gcc-avr avr-libc libsimavr-dev libelf-dev)';

const SKETCH = resolve('public', 'pulse-box');
const HERE = resolve('tests', 'unit', 'pulse-box');
const WARNINGS = ['-Wall', '-Wextra', '-Werror'];

/** A folder for programs; `remove` takes it away. */
export function makeFolder(): { readonly path: string; remove(): void } {
  const path = mkdtempSync(join(tmpdir(), 'evenline-pulse-box-'));
  return { path, remove: () => rmSync(path, { recursive: true, force: true }) };
}

/** @throws Error with what the compiler or the program said */
function run(command: string, args: readonly string[], input = ''): string {
  const { status, stdout, stderr, error } = spawnSync(command, args, { input, encoding: 'latin1', maxBuffer: 1e8 });
  if (status !== 0) throw new Error(`${command}: ${error?.message ?? stderr}`);
  return stdout;
}

export function compileFirmware(folder: string): string {
  const elf = join(folder, 'pulse-box.elf');
  run('avr-gcc', ['-std=gnu11', '-Os', ...WARNINGS, '-mmcu=atmega328p', join(SKETCH, 'pulse-box.c'), '-o', elf]);
  return elf;
}

/** Bytes of flash and of static memory. */
export function sizeOf(elf: string): { readonly flash: number; readonly memory: number } {
  const [text, data, bss] = (run('avr-size', [elf]).split('\n')[1] ?? '').trim().split(/\s+/).map(Number) as [number, number, number];
  return { flash: text + data, memory: data + bss };
}

/** The parts that know no hardware, fed with commands. */
export function hostProgram(folder: string): (commands: readonly string[]) => string {
  const program = join(folder, 'host');
  run('cc', ['-O2', ...WARNINGS, `-I${SKETCH}`, join(HERE, 'host.c'), '-o', program]);
  return (commands) => run(program, [], `${commands.join('\n')}\n`);
}

export interface PinEvent {
  /** Microseconds since the chip was switched on. */
  readonly us: number;
  /** Port letter, or U for a byte into the serial line. */
  readonly port: string;
  readonly pin: number;
  readonly level: number;
}

/** The real firmware in a simulated chip; what it sent. The last event ends the run. */
export function simulate(folder: string, elf: string, events: readonly PinEvent[]): string {
  const program = join(folder, 'simulated');
  run('cc', ['-O2', ...WARNINGS, join(HERE, 'simulated.c'), '-o', program, '-lsimavr', '-lsimavrparts', '-lelf']);
  const lines = [...events].sort((a, b) => a.us - b.us).map(({ us, port, pin, level }) => `${us} ${port} ${pin} ${level}`);
  return run(program, [elf], `${lines.join('\n')}\n`);
}
