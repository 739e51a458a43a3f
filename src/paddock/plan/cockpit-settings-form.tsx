import { zodResolver } from '@hookform/resolvers/zod';
import { type FieldError, type FieldPath, type UseFormReturn, useForm } from 'react-hook-form';
import { type CockpitSettingsRequest, cockpitSettingsRequestSchema } from '#shared/api/entries.ts';
import { LEAD_SIGMA_UNLEARNT_MS } from '#shared/course/pack.ts';
import { Button } from '#src/components/button.tsx';
import { SelectField, TextField } from '#src/components/field.tsx';
import { ChoiceCards } from '#src/paddock/parts/choice-cards.tsx';
import { SCALE_RULES } from './scale-rules.ts';

const UNLEARNT = { glass: LEAD_SIGMA_UNLEARNT_MS, wired: LEAD_SIGMA_UNLEARNT_MS };

/** Asks as the request does, by the same schema; only an unlearnt lead is a figure here and left out there. */
export function CockpitSettingsForm({
  settings,
  busy,
  save,
}: {
  readonly settings: CockpitSettingsRequest;
  readonly busy: boolean;
  readonly save: (settings: CockpitSettingsRequest) => void;
}) {
  const form = useForm<CockpitSettingsRequest>({
    resolver: zodResolver(cockpitSettingsRequestSchema),
    // What was touched stays when the server's answer comes anew.
    values: { ...settings, tapLeadSigmaMs: settings.tapLeadSigmaMs ?? UNLEARNT },
    resetOptions: { keepDirtyValues: true },
  });
  return (
    <form className="grid gap-5" noValidate onSubmit={form.handleSubmit((values) => save(asSaved(values)))}>
      <ChoiceCards legend="scale rule" choices={SCALE_RULES} {...form.register('scaleRule')} />
      <Touches form={form} />
      <Screen form={form} />
      <div>
        <Button type="submit" busy={busy}>
          save settings
        </Button>
      </div>
    </form>
  );
}

function asSaved({ tapLeadSigmaMs, ...rest }: CockpitSettingsRequest): CockpitSettingsRequest {
  const { glass, wired } = tapLeadSigmaMs ?? UNLEARNT;
  return glass === UNLEARNT.glass && wired === UNLEARNT.wired ? rest : { ...rest, tapLeadSigmaMs: { glass, wired } };
}

interface Part {
  readonly form: UseFormReturn<CockpitSettingsRequest>;
}

const GRID = 'grid grid-cols-2 items-start gap-x-4 gap-y-4 lg:grid-cols-5';
const LEAD_WORDS = 'Type milliseconds from -1000 to 1000.';
const SIGMA_WORDS = 'Type milliseconds above 0, at most 1000.';

function Touches({ form }: Part) {
  const { errors } = form.formState;
  return (
    <fieldset>
      <legend className="mb-1 font-bold">the navigator's touches</legend>
      <p className="text-quiet mb-3 max-w-3xl">
        The lead is how long after the instant that counts a touch comes; negative if it comes before. In two runs of three it lies within
        the second figure, which is {LEAD_SIGMA_UNLEARNT_MS} as long as nobody has learnt it. The scatter is what is left: two touches of
        three lie within it.
      </p>
      <div className={GRID}>
        <NumberField form={form} name="tapLeadMs.glass" label="lead, screen" unit="ms" error={errors.tapLeadMs?.glass} words={LEAD_WORDS} />
        <NumberField
          form={form}
          name="tapLeadSigmaMs.glass"
          label="known within"
          full="screen lead known within"
          unit="ms"
          error={errors.tapLeadSigmaMs?.glass}
          words={SIGMA_WORDS}
        />
        <NumberField form={form} name="tapLeadMs.wired" label="lead, wired" unit="ms" error={errors.tapLeadMs?.wired} words={LEAD_WORDS} />
        <NumberField
          form={form}
          name="tapLeadSigmaMs.wired"
          label="known within"
          full="wired lead known within"
          unit="ms"
          error={errors.tapLeadSigmaMs?.wired}
          words={SIGMA_WORDS}
        />
        <NumberField form={form} name="tapScatterMs" label="scatter" unit="ms" error={errors.tapScatterMs} words={SIGMA_WORDS} />
      </div>
    </fieldset>
  );
}

function Screen({ form }: Part) {
  const { errors } = form.formState;
  return (
    <fieldset>
      <legend className="mb-1 font-bold">plan and screen</legend>
      <p className="text-quiet mb-3 max-w-3xl">The reserve is kept in hand until the last tenth of the course, then given back.</p>
      <div className={GRID}>
        <NumberField
          form={form}
          name="reserveS"
          label="reserve in hand"
          unit="s"
          error={errors.reserveS}
          words="Type seconds from 0 to 30."
        />
        <SelectField label="button" {...form.register('buttonSide')}>
          <option value="right">on the right</option>
          <option value="left">on the left</option>
        </SelectField>
        <SelectField label="speeds in" {...form.register('speedUnit')}>
          <option value="km/h">km/h</option>
          <option value="mph">mph</option>
        </SelectField>
      </div>
    </fieldset>
  );
}

function NumberField({
  form,
  name,
  label,
  full = label,
  unit,
  error,
  words,
}: Part & {
  readonly name: FieldPath<CockpitSettingsRequest>;
  readonly label: string;
  /** What it is called where its neighbours cannot be seen. */
  readonly full?: string;
  readonly unit: string;
  readonly error: FieldError | undefined;
  readonly words: string;
}) {
  return (
    <TextField
      label={label}
      aria-label={full}
      unit={unit}
      type="number"
      step="any"
      className="font-figure"
      {...form.register(name, { valueAsNumber: true })}
      error={error === undefined ? undefined : words}
    />
  );
}
