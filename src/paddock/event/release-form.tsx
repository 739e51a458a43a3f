import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { setRelease } from '#src/api/events/set-release.ts';
import { keys } from '#src/api/query-keys.ts';
import { Button } from '#src/components/button.tsx';
import { SelectField, TextField } from '#src/components/field.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { formatDate } from '#src/paddock/parts/when.ts';
import { useSignedIn } from '#src/paddock/signed-in.tsx';
import type { PlacedAttempt } from './next-thing.ts';
import { dateInZone, timeInZone, zonedInstant } from './zoned-instant.ts';

interface ReleaseForm {
  readonly day: string;
  readonly time: string;
}

const TIME = /^([01]?\d|2[0-3]):[0-5]\d(:[0-5]\d)?$/;

/** Asks in the order of a start list: day, then time of day, in the event's own zone. */
export function ReleaseEditor({ placed, done }: { readonly placed: PlacedAttempt; readonly done: () => void }) {
  const { event, attempt } = placed;
  const save = useSaveRelease(attempt.id, done);
  const days = daysOf(event.startsOn, event.endsOn);
  const form = useForm<ReleaseForm>({
    defaultValues:
      attempt.releaseMs === null
        ? { day: days[0] ?? event.startsOn, time: '' }
        : { day: dateInZone(attempt.releaseMs, event.timeZone), time: timeInZone(attempt.releaseMs, event.timeZone) },
  });
  const submit = form.handleSubmit(({ day, time }) => {
    const instant = zonedInstant(day, padTime(time), event.timeZone);
    if (instant === null)
      form.setError('time', { message: 'The clocks skip this time of day. Ask the race office which instant is meant.' });
    else save.mutate(instant);
  });
  return (
    <form className="grid max-w-md gap-4" noValidate onSubmit={submit}>
      <SelectField label="day" {...form.register('day')}>
        {withDay(days, form.getValues('day')).map((day) => (
          <option key={day} value={day}>
            {formatDate(day)}
          </option>
        ))}
      </SelectField>
      <TextField
        label="release"
        unit={event.timeZone}
        inputMode="numeric"
        placeholder="10:42:00"
        autoFocus
        {...form.register('time', {
          pattern: { value: TIME, message: 'Type hours, minutes and seconds, for example 10:42:00.' },
          required: 'Type the release from the start list.',
        })}
        error={form.formState.errors.time?.message}
        className="font-figure"
      />
      {save.isError ? <FailureNotice error={save.error} /> : null}
      <div className="flex gap-2">
        <Button kind="main" type="submit" busy={save.isPending}>
          set release
        </Button>
        <Button kind="bare" onClick={done}>
          leave it
        </Button>
      </div>
    </form>
  );
}

function useSaveRelease(attemptId: string, done: () => void) {
  const client = useQueryClient();
  const { user, team } = useSignedIn();
  return useMutation({
    mutationFn: (releaseMs: number) => setRelease(attemptId, releaseMs),
    onSuccess: async () => {
      await client.invalidateQueries({ queryKey: keys.events(user.id, team.id) });
      done();
    },
  });
}

/** `9:05` to `09:05:00`. */
export function padTime(time: string): string {
  const [hours = '', minutes = '00', seconds = '00'] = time.split(':');
  return `${hours.padStart(2, '0')}:${minutes}:${seconds}`;
}

function daysOf(from: string, to: string): string[] {
  const days: string[] = [];
  for (let at = Date.parse(`${from}T00:00:00Z`); at <= Date.parse(`${to}T00:00:00Z`) && days.length < 31; at += 86_400_000) {
    days.push(new Date(at).toISOString().slice(0, 10));
  }
  return days;
}

const withDay = (days: readonly string[], day: string): readonly string[] => (days.includes(day) ? days : [day, ...days]);
