import { cleanup, fireEvent, screen as page } from '@testing-library/react';
import { afterEach, describe, expect, it } from 'vitest';
import { formatClock } from '#shared/course/format.ts';
import { GridCheck } from '#src/cockpit/grid/grid-check.tsx';
import { drawScreen, pointerDown, type Screen } from './screen.tsx';

afterEach(cleanup);

const onGrid = (): Promise<Screen> => drawScreen({ screen: <GridCheck side="right" />, releaseInMs: 600_000 });

const item = (screen: Screen, name: string): Element => {
  const found = [...screen.container.querySelectorAll('.grid-item')].find((row) => row.querySelector('.grid-name')?.textContent === name);
  if (found === undefined) throw new Error(`no item ${name}`);
  return found;
};
const isReady = (screen: Screen, name: string): boolean => item(screen, name).getAttribute('data-ready') === 'true';

const type = (keys: string): void => {
  for (const key of keys) fireEvent.click(page.getByRole('button', { name: key === '.' ? 'point' : key }));
};

describe('grid check', () => {
  it('lets only what is missing stand out, and says so in words', async () => {
    const screen = await onGrid();
    expect(isReady(screen, 'course')).toBe(true);
    expect(isReady(screen, 'sensor')).toBe(false);
    expect(item(screen, 'sensor').textContent).toContain('missing: nothing connected');
    expect(item(screen, 'course').textContent).toContain(screen.rig.pack.courseBook.name);
  });

  it('calls the button good once it was pressed', async () => {
    const screen = await onGrid();
    expect(isReady(screen, 'button')).toBe(false);
    pointerDown(page.getByRole('button', { name: 'touch try the button' }), screen.rig.world.now() - screen.opened.originMs);
    await screen.pass(100);
    expect(isReady(screen, 'button')).toBe(true);
    expect(page.getByRole('button', { name: 'touch button good' })).toBeTruthy();
  });

  it('takes a new release from the keys, reads it back and journals it', async () => {
    const screen = await onGrid();
    const before = screen.rig.pack.attempt.releaseMs ?? 0;
    const wanted = formatClock(before + 210_000, screen.rig.pack.event.timeZone);
    fireEvent.click(page.getByRole('button', { name: /^release/ }));
    type(wanted.replaceAll(':', ''));
    expect(page.getByRole('status').textContent).toContain(`release ${wanted}, 3:30 later`);
    fireEvent.click(page.getByRole('button', { name: 'set' }));
    await screen.pass(100);
    expect(screen.opened.session.course().releaseMs).toBe(before + 210_000);
    const journal = await screen.rig.journal(screen.opened.session.header.runId);
    expect(journal.find((o) => o.type === 'release-set.v1')).toMatchObject({ releaseMs: before + 210_000 });
  });

  it('sets nothing while digits are missing', async () => {
    await onGrid();
    fireEvent.click(page.getByRole('button', { name: /^release/ }));
    type('1046');
    expect(page.getByRole<HTMLButtonElement>('button', { name: 'set' }).disabled).toBe(true);
  });

  it('takes an official target time, metres behind the line and a moved finish', async () => {
    const screen = await onGrid();
    fireEvent.click(page.getByRole('button', { name: /^target/ }));
    type('0203050');
    fireEvent.click(page.getByRole('button', { name: 'set' }));
    fireEvent.click(page.getByRole('button', { name: /^behind the line/ }));
    type('4.5');
    fireEvent.click(page.getByRole('button', { name: 'set' }));
    const finish = screen.opened.session.course().places.find((p) => p.checkpoint.duty === 'finish');
    const movedKm = ((finish?.atM ?? 0) / 1000 - 0.1).toFixed(3);
    fireEvent.click(page.getByRole('button', { name: /^finish at/ }));
    fireEvent.click(page.getByRole('button', { name: new RegExp(`^${finish?.checkpoint.name}`) }));
    type(movedKm);
    expect(page.getByRole('status').textContent).toContain('100 m nearer the start');
    fireEvent.click(page.getByRole('button', { name: 'set' }));
    await screen.pass(100);
    const course = screen.opened.session.course();
    expect(course).toMatchObject({ targetTimeMs: 1_230_500, stagedBehindM: 4.5 });
    expect(course.places.find((p) => p.checkpoint.duty === 'finish')?.atM).toBeCloseTo(Number(movedKm) * 1000, 6);
  });

  it('adds a limit on the course, and refuses one that ends before it begins', async () => {
    const screen = await onGrid();
    const before = screen.opened.session.course().zones.length;
    fireEvent.click(page.getByRole('button', { name: /^limits/ }));
    fireEvent.click(page.getByRole('button', { name: 'a new zone' }));
    type('60');
    fireEvent.click(page.getByRole('button', { name: /^from/ }));
    type('0.5');
    fireEvent.click(page.getByRole('button', { name: /^to/ }));
    type('0.4');
    expect(page.getByRole('status').textContent).toBe('the zone must end after it begins');
    fireEvent.click(page.getByRole('button', { name: 'delete last' }));
    type('95');
    fireEvent.click(page.getByRole('button', { name: 'set' }));
    await screen.pass(100);
    const zones = screen.opened.session.course().zones;
    expect(zones).toHaveLength(before + 1);
    expect(zones.find((zone) => zone.fromM === 500)).toMatchObject({ toM: 950, limit: expect.closeTo(60 / 3.6, 9) });
  });
});
