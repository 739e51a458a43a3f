/** What a bench answers: figures by name, each with its unit and, where the project has set one, its bound. */
export interface Figure {
  readonly value: number;
  readonly unit: string;
  readonly atMost?: number;
  readonly atLeast?: number;
}

export type Figures = Readonly<Record<string, Figure | number>>;

/** A bench with more to say than a list of figures answers with its own text and JSON. */
export interface Report {
  readonly text: string;
  readonly json: object;
}

export interface BenchOptions {
  /** End within 40 s, with fewer rounds. */
  readonly quick: boolean;
  /** Of the accuracy bench: settings, methods and drives a setting; all where left out. */
  readonly only?: readonly string[];
  readonly methods?: readonly string[];
  readonly drives?: number;
}

/** `tests/bench/NAME.bench.ts` exports this as `bench`. */
export type Bench = (options: BenchOptions) => Figures | Report | Promise<Figures | Report>;

export const isReport = (answer: Figures | Report): answer is Report => typeof (answer as Report).text === 'string';

const plain = (figure: Figure | number): Figure => (typeof figure === 'number' ? { value: figure, unit: '' } : figure);
const NUMBER = new Intl.NumberFormat('en', { maximumSignificantDigits: 4 });

function boundOf({ atMost, atLeast }: Figure): string {
  return [atMost === undefined ? '' : `≤ ${NUMBER.format(atMost)}`, atLeast === undefined ? '' : `≥ ${NUMBER.format(atLeast)}`]
    .filter((text) => text !== '')
    .join(', ');
}

function isMissed({ value, atMost = Number.POSITIVE_INFINITY, atLeast = Number.NEGATIVE_INFINITY }: Figure): boolean {
  return !(value <= atMost && value >= atLeast);
}

export function figuresTable(figures: Figures): string {
  const rows = Object.entries(figures).map(([name, given]) => {
    const figure = plain(given);
    return [name, NUMBER.format(figure.value), figure.unit, boundOf(figure), isMissed(figure) ? 'missed' : ''];
  });
  const all = [['figure', 'value', 'unit', 'bound', ''], ...rows];
  const widths = [0, 1, 2, 3, 4].map((column) => Math.max(...all.map((row) => row[column]?.length ?? 0)));
  const line = (row: readonly string[]) =>
    row
      .map((cell, column) => (column === 1 ? cell.padStart(widths[column] ?? 0) : cell.padEnd(widths[column] ?? 0)))
      .join('  ')
      .trimEnd();
  return all.map(line).join('\n');
}

export function figuresJson(figures: Figures): string {
  return JSON.stringify(Object.fromEntries(Object.entries(figures).map(([name, figure]) => [name, plain(figure).value])));
}
