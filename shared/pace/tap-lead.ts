import { LEAD_SIGMA_UNLEARNT_MS, type Pack } from '#shared/course/pack.ts';
import type { TapAct } from '#shared/pace/run-state.ts';

/** How well the navigator's lead is known, s. */
export const leadSigma = (pack: Pack, input: TapAct['input']): number =>
  (pack.settings.tapLeadSigmaMs?.[input] ?? LEAD_SIGMA_UNLEARNT_MS) / 1000;
