import { afterEach, describe, expect, it, vi } from 'vitest';
import { acceptUpdate, holdUpdates, subscribeToUpdate, updateState } from '#src/components/app-update.ts';

const reload = vi.spyOn(location, 'reload').mockImplementation(() => undefined);
afterEach(() => reload.mockClear());

describe('a newer version', () => {
  it('waits while a run is open in this window, and says why', async () => {
    const told = vi.fn();
    const release = subscribeToUpdate(told);
    const letGo = holdUpdates();
    await acceptUpdate();
    expect(updateState()).toBe('held by a run');
    expect(told).toHaveBeenCalled();
    expect(reload).not.toHaveBeenCalled();
    letGo();
    release();
  });

  it('waits while another window answers that a run is open there', async () => {
    const elsewhere = new BroadcastChannel('evenline.run-open');
    elsewhere.onmessage = () => elsewhere.postMessage('run open');
    await acceptUpdate();
    expect(reload).not.toHaveBeenCalled();
    elsewhere.close();
  });

  it('comes in when asked for and no run is open anywhere', async () => {
    await acceptUpdate();
    expect(reload).toHaveBeenCalledTimes(1);
  });
});
