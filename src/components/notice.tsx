import type { ReactNode } from 'react';
import { Icon } from './icon.tsx';

/** Something is wrong: the fault sign, what it is, and the act that mends it. Text stays ink; the sign carries the colour. */
export function FaultNotice({ children, act }: { readonly children: ReactNode; readonly act?: ReactNode }) {
  return (
    <div role="alert" className="border-fault bg-pool flex flex-wrap items-center gap-3 border-l-4 p-3">
      <Icon name="fault" className="text-fault size-6" />
      <div className="grow basis-60">{children}</div>
      {act}
    </div>
  );
}
