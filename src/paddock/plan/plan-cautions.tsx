import type { ReactNode } from 'react';
import { formatSpeed, roundedDigits } from '#shared/course/format.ts';
import type { Pack } from '#shared/course/pack.ts';
import { checkTyre } from '#shared/course/tyre-symbol.ts';
import { Cautions } from '#src/components/cautions.tsx';
import { FaultNotice } from '#src/components/notice.tsx';
import type { PackPlan } from './pack-plan.ts';

/** What stands against the plan: stop signs first, then limits, then the cautions every plan carries. */
export function PlanCautions({ pack, plan, tyre }: { readonly pack: Pack; readonly plan: PackPlan; readonly tyre: string | null }) {
  return (
    <section aria-labelledby="plan-cautions" className="mt-8 grid gap-4">
      <h2 id="plan-cautions" className="text-xl font-bold">
        Limits and cautions
      </h2>
      <Outcome plan={plan} />
      <Tyre pack={pack} tyre={tyre} />
      <ul className="list-disc pl-5">
        <li>{capWords(pack, plan)}</li>
        {plan.zones.map((zone) => (
          <li key={zone.id}>
            {zone.name}: {zone.from.text} to {zone.to.text} {zone.to.unit}, {zone.limit.text} {zone.limit.unit}
            {zone.source === 'crew' ? ', your own choice' : ''}
          </li>
        ))}
        {pack.courseBook.slowDownLimit === null ? null : (
          <li>
            After the finish: {pack.courseBook.slowDownLimit.text} {pack.courseBook.slowDownLimit.unit}
          </li>
        )}
      </ul>
      <Cautions />
    </section>
  );
}

function capWords(pack: Pack, plan: PackPlan): string {
  const { cap } = pack.raceClass;
  const { speedUnit } = pack.settings;
  const peak = `the plan's highest speed is ${formatSpeed(plan.highest, speedUnit)} ${speedUnit}`;
  if (cap === null || plan.top === null) return `No cap in this class; ${peak}.`;
  return `Cap ${cap.text} ${cap.unit}, ${roundedDigits(pack.plan.capMargin * 100, 0)} % of it kept free; ${peak}.`;
}

function Outcome({ plan }: { readonly plan: PackPlan }): ReactNode {
  const { outcome, by } = plan.plan;
  if (outcome === 'on zero') return null;
  const end = outcome === 'cannot be made up' ? 'late' : 'early';
  return (
    <FaultNotice>
      The target time {outcome} within these limits: the plan finishes {roundedDigits(by, 1)} s {end}.
    </FaultNotice>
  );
}

function Tyre({ pack, tyre }: { readonly pack: Pack; readonly tyre: string | null }): ReactNode {
  const { stop, message } = checkTyre(tyre ?? '', pack.raceClass.cap, pack.wheel.setupName, pack.settings.speedUnit);
  return stop ? <FaultNotice>{message}</FaultNotice> : <p>{message}</p>;
}
