import { LEAD_SIGMA_UNLEARNT_MS, type Pack } from '#shared/course/pack.ts';
import type { RunState, TapAct } from '#shared/pace/run-state.ts';

/** How well the navigator's lead is known, s. */
export const leadSigma = (pack: Pack, input: TapAct['input']): number =>
  (pack.settings.tapLeadSigmaMs?.[input] ?? LEAD_SIGMA_UNLEARNT_MS) / 1000;

/** The input whose lead the estimator follows: that of the first tap that stands. Another one's lead is a source of scatter. */
export const leadInput = ({ acts }: RunState): TapAct['input'] => acts.taps.find((t) => !acts.voided.includes(t.seq))?.input ?? 'glass';
