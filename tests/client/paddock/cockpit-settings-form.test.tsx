import { cleanup, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { afterEach, describe, expect, it, vi } from 'vitest';
import type { CockpitSettingsRequest } from '#shared/api/entries.ts';
import { CockpitSettingsForm } from '#src/paddock/plan/cockpit-settings-form.tsx';
import { samplePack } from './sample-pack.ts';

const UNLEARNT: CockpitSettingsRequest = { ...samplePack.settings, scaleRule: 'estimator', reserveS: 0 };
const field = (name: string) => screen.getByRole('spinbutton', { name }) as HTMLInputElement;
const rule = (name: string) => screen.getByRole('radio', { name }) as HTMLInputElement;

function open(settings: CockpitSettingsRequest) {
  const save = vi.fn<(settings: CockpitSettingsRequest) => void>();
  const form = (now: CockpitSettingsRequest) => <CockpitSettingsForm settings={now} busy={false} save={save} />;
  const { rerender } = render(form(settings));
  return { save, person: userEvent.setup(), answer: (now: CockpitSettingsRequest) => rerender(form(now)) };
}

async function type(person: ReturnType<typeof userEvent.setup>, name: string, text: string) {
  await person.clear(field(name));
  if (text !== '') await person.type(field(name), text);
}

afterEach(cleanup);

describe('cockpit settings', () => {
  it('saved as they are stay what they were: an unlearnt lead is a figure on the page and left out of what is sent', async () => {
    const { save, person } = open(UNLEARNT);
    expect(rule('estimator, recommended').checked).toBe(true);
    expect(field('screen lead known within').value).toBe('200');
    await person.click(screen.getByRole('button', { name: 'save settings' }));
    await vi.waitFor(() => expect(save).toHaveBeenCalledWith(UNLEARNT));
  });

  it('are sent whole, as figures', async () => {
    const { save, person } = open(UNLEARNT);
    await person.click(rule('ratio'));
    await type(person, 'lead, screen', '-45.5');
    await type(person, 'screen lead known within', '60');
    await type(person, 'scatter', '80');
    await type(person, 'reserve in hand', '1.5');
    await person.selectOptions(screen.getByLabelText('button'), 'left');
    await person.click(screen.getByRole('button', { name: 'save settings' }));
    const sent: CockpitSettingsRequest = {
      ...UNLEARNT,
      scaleRule: 'ratio',
      tapLeadMs: { glass: -45.5, wired: 0 },
      tapLeadSigmaMs: { glass: 60, wired: 200 },
      tapScatterMs: 80,
      reserveS: 1.5,
      buttonSide: 'left',
    };
    await vi.waitFor(() => expect(save).toHaveBeenCalledWith(sent));
  });

  it('that cannot be are kept as typed, with what to do, and not sent', async () => {
    const { save, person } = open(UNLEARNT);
    await type(person, 'scatter', '');
    await type(person, 'lead, wired', '2000');
    await person.click(screen.getByRole('button', { name: 'save settings' }));
    expect(await screen.findByText('Type milliseconds above 0, at most 1000.')).toBeDefined();
    expect(screen.getByText('Type milliseconds from -1000 to 1000.')).toBeDefined();
    expect(field('lead, wired').value).toBe('2000');
    expect(save).not.toHaveBeenCalled();
  });

  it('changed elsewhere come in, but for what is being typed', async () => {
    const { person, answer } = open(UNLEARNT);
    await type(person, 'scatter', '80');
    answer({ ...UNLEARNT, scaleRule: 'gain', tapScatterMs: 120, reserveS: 2 });
    await vi.waitFor(() => expect(field('reserve in hand').value).toBe('2'));
    expect(rule('gain ratio').checked).toBe(true);
    expect(field('scatter').value).toBe('80');
  });
});
