import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router';
import type { GarageResponse } from '#shared/api/teams.ts';
import { roundedDigits } from '#shared/course/format.ts';
import { garageQuery } from '#src/api/teams/get-garage.ts';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageTitle } from '#src/components/page-title.tsx';
import { PracticeEventButton } from '#src/paddock/event/practice-event-button.tsx';
import { Cell, DataTable, FigureCell, Row, RowHead } from '#src/paddock/parts/data-table.tsx';
import { Loaded } from '#src/paddock/parts/loaded.tsx';
import { deviceZone, formatDay } from '#src/paddock/parts/when.ts';
import { useSignedIn } from '#src/paddock/signed-in.tsx';

type Car = GarageResponse['cars'][number];
type Setup = Car['wheelSetups'][number];

export function GaragePage() {
  const { user, team } = useSignedIn();
  const garage = useQuery(garageQuery(user.id, team.id));
  return (
    <>
      <PageTitle>Garage</PageTitle>
      <Loaded query={garage}>
        {({ cars }) =>
          cars.length === 0 ? (
            <EmptyState act={<PracticeEventButton />}>
              Your cars will stand here, each with its wheel set-ups and the history of every wheel scale.
            </EmptyState>
          ) : (
            cars.map((car) => <CarSection key={car.id} car={car} />)
          )
        }
      </Loaded>
    </>
  );
}

function CarSection({ car }: { readonly car: Car }) {
  return (
    <section className="mb-12" aria-label={car.name}>
      <h2 className="text-2xl font-bold">{car.name}</h2>
      <p className="text-quiet mb-4">
        {dialWords(car.dialReadsHighPercent)} {offsetWords(car.behindNose)}
      </p>
      {car.wheelSetups.map((setup) => (
        <SetupSection key={setup.id} setup={setup} />
      ))}
    </section>
  );
}

function dialWords(percent: number): string {
  const digits = roundedDigits(percent, 1);
  if (Number(digits) === 0) return 'Its dial reads true.';
  return `Its dial reads ${digits} % ${percent > 0 ? 'high' : 'low'}.`;
}

function offsetWords(behindNose: Car['behindNose']): string {
  if (behindNose === null) return 'Where seat and aerial are is not measured: they count as at the nose.';
  const { seatM, aerialM } = behindNose;
  return `Behind its nose: the navigator's sight line ${roundedDigits(seatM, 1)} m, the GNSS aerial ${roundedDigits(aerialM, 1)} m.`;
}

function SetupSection({ setup }: { readonly setup: Setup }) {
  const [inUse] = setup.scales;
  return (
    <section className="mb-8" aria-label={`set-up ${setup.name}`}>
      <h3 className="text-xl font-bold">{setup.name}</h3>
      <p className="text-quiet mb-2">
        {setup.tyre === '' ? 'tyre not noted' : setup.tyre}; wheel channel {setup.channel}, {setup.pulsesPerTurn} pulses a turn
        {setup.driven ? '; a driven wheel, which may spin at the start' : ''}
        {setup.secondChannel === null ? '' : `; compared with the wheel on channel ${setup.secondChannel}`}
      </p>
      {inUse === undefined ? (
        <EmptyState>Its wheel scales will stand here once one is measured.</EmptyState>
      ) : (
        <DataTable
          caption={`wheel scales of ${setup.name}, newest first`}
          head={[
            { name: 'from' },
            { name: 'wheel scale', unit: 'mm a pulse', figures: true },
            { name: 'sure to', unit: '± %', figures: true, wide: true },
            { name: 'recorded' },
            { name: 'note', wide: true },
          ]}
        >
          {setup.scales.map((scale) => (
            <Row key={scale.id}>
              <RowHead>
                {scale.runId === null ? (
                  scale.source
                ) : (
                  <Link className="underline underline-offset-4" to={`/runs/${scale.runId}`}>
                    a run
                  </Link>
                )}
                {scale.id === inUse.id ? <span className="font-bold">, in use</span> : null}
                <span className="text-quiet block text-sm md:hidden">{scale.note}</span>
              </RowHead>
              <FigureCell>{roundedDigits(scale.mmPerPulse, 3)}</FigureCell>
              <FigureCell wide>{roundedDigits(2 * scale.scaleSigma * 100, 2)}</FigureCell>
              <Cell className="whitespace-nowrap">{formatDay(scale.recordedMs, deviceZone())}</Cell>
              <Cell wide>{scale.note}</Cell>
            </Row>
          ))}
        </DataTable>
      )}
    </section>
  );
}
