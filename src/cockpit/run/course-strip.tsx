import { useEffect, useRef, useState } from 'react';
import { formatSpeed } from '#shared/course/format.ts';
import type { Readout } from '#shared/pace/readout.ts';
import { traceOf } from '#shared/pace/trace.ts';
import { usePainter, useStructure } from '#src/cockpit/live/use-live.ts';
import {
  createTrace,
  labelsWithRoom,
  type StripSize,
  stripFoot,
  stripMiddle,
  stripPath,
  stripX,
  stripY,
} from '#src/cockpit/view/strip-geometry.ts';
import type { CourseNow } from '#src/run/run-session-contract.ts';
import { useRunSettings } from './run-context.ts';

/** Steps of the own trace along the course: finer than the strip has pixels on any tablet in use. */
const TRACE_STEPS = 600;

/** The whole course at a glance: own error so far in ink, the plan dotted, zones as columns, places as dots on the line. */
export function CourseStrip() {
  const { session, speedUnit } = useRunSettings();
  const structure = useStructure();
  const [frame, size] = useSize();
  const course = session.course();
  const labels = labelsWithRoom(
    course.zones.map((zone) => ({
      id: zone.id,
      x: stripX(size, course.lengthM, (zone.fromM + zone.toM) / 2),
      text: `${formatSpeed(zone.limit, speedUnit)}`,
    })),
    size.width,
  );
  return (
    <section ref={frame} className="strip" aria-label="course">
      {size.width === 0 ? null : (
        <svg viewBox={`0 0 ${size.width} ${size.height}`} role="img" aria-label="time error along the course">
          <Zones course={course} size={size} />
          {labels.map((label) => (
            <text key={label.id} x={label.x} y={size.height - 14} textAnchor="middle">
              {label.text}
            </text>
          ))}
          <line
            x1={stripX(size, 1, 0)}
            x2={stripX(size, 1, 1)}
            y1={stripMiddle(size)}
            y2={stripMiddle(size)}
            stroke="var(--quiet)"
            strokeWidth="2"
          />
          <path
            d={stripPath(size, course.lengthM, course.plan)}
            fill="none"
            stroke="var(--quiet)"
            strokeWidth="3"
            strokeDasharray="0.1 8"
            strokeLinecap="round"
          />
          <Places course={course} size={size} next={structure.next?.checkpoint.id ?? null} distance={structure.distance} />
          <OwnTrace course={course} size={size} />
        </svg>
      )}
    </section>
  );
}

interface Drawn {
  readonly course: CourseNow;
  readonly size: StripSize;
}

function Zones({ course, size }: Drawn) {
  return course.zones.map((zone) => {
    const from = stripX(size, course.lengthM, zone.fromM);
    const width = Math.max(4, stripX(size, course.lengthM, zone.toM) - from);
    return <rect key={zone.id} x={from} width={width} y={8} height={stripFoot(size) - 8} fill="var(--zone)" />;
  });
}

/** Filled once behind the car, open ahead of it, larger for the next one. */
function Places({ course, size, next, distance }: Drawn & { readonly next: string | null; readonly distance: number }) {
  return course.places
    .filter((place) => place.atM <= course.lengthM)
    .map(({ checkpoint, atM }) => (
      <circle
        key={checkpoint.id}
        cx={stripX(size, course.lengthM, atM)}
        cy={stripMiddle(size)}
        r={checkpoint.id === next ? 10 : 7}
        fill={atM <= distance ? 'var(--ink)' : 'var(--ground)'}
        stroke="var(--ink)"
        strokeWidth="3"
      />
    ));
}

/** The own error so far and the car, written past React. */
function OwnTrace({ course, size }: Drawn) {
  const { session } = useRunSettings();
  const path = useRef<SVGPathElement>(null);
  const car = useRef<SVGCircleElement>(null);
  const trace = useRef<ReturnType<typeof createTrace> | null>(null);
  trace.current ??= createTrace(
    course.lengthM,
    TRACE_STEPS,
    session.derive(traceOf).map((point) => ({ d: point.d, errorS: point.timeErrorS })),
  );
  const drawnFor = useRef<StripSize | null>(null);
  usePainter('figures', (readout) => {
    if (readout.timeError === null || trace.current === null) return;
    const point = { d: readout.distance, errorS: readout.timeError };
    const changed = trace.current.add(point);
    if (changed || drawnFor.current !== size) path.current?.setAttribute('d', stripPath(size, course.lengthM, trace.current.points()));
    drawnFor.current = size;
    const x = stripX(size, course.lengthM, point.d).toFixed(1);
    const y = stripY(size, point.errorS).toFixed(1);
    car.current?.setAttribute('transform', `translate(${x} ${y})`);
    car.current?.setAttribute('fill', carFill(readout));
  });
  return (
    <>
      <path ref={path} fill="none" stroke="var(--ink)" strokeWidth="5" strokeLinejoin="round" />
      <circle ref={car} r="9" stroke="var(--ground)" strokeWidth="2" />
    </>
  );
}

function carFill(readout: Readout): string {
  const side = readout.band?.side ?? 'level';
  if (side === 'late' || side === 'below') return 'var(--late)';
  return side === 'level' ? 'var(--ink)' : 'var(--early)';
}

function useSize(): readonly [React.RefObject<HTMLElement | null>, StripSize] {
  const element = useRef<HTMLElement>(null);
  const [size, setSize] = useState<StripSize>({ width: 0, height: 0 });
  useEffect(() => {
    if (element.current === null) return;
    const observer = new ResizeObserver(([entry]) => {
      if (entry !== undefined) setSize({ width: Math.round(entry.contentRect.width), height: Math.round(entry.contentRect.height) });
    });
    observer.observe(element.current);
    return () => observer.disconnect();
  }, []);
  return [element, size];
}
