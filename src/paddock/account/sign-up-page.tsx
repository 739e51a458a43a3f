import { zodResolver } from '@hookform/resolvers/zod';
import { type FieldErrors, useForm } from 'react-hook-form';
import { Link } from 'react-router';
import { z } from 'zod';
import { PASSWORD_MIN, signUpRequestSchema } from '#shared/api/auth.ts';
import { signUp } from '#src/api/auth/sign-up.ts';
import { Button } from '#src/components/button.tsx';
import { Cautions } from '#src/components/cautions.tsx';
import { TextField } from '#src/components/field.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { AccountFrame } from './account-frame.tsx';
import { useEnter } from './use-enter.ts';

const formSchema = signUpRequestSchema.extend({ read: z.literal(true) });
type SignUpForm = z.input<typeof formSchema>;

export function SignUpPage() {
  const enter = useEnter(({ email, password, name, teamName }: SignUpForm) => signUp({ email, password, name, teamName }));
  const form = useForm<SignUpForm>({
    resolver: zodResolver(formSchema),
    defaultValues: { name: '', teamName: '', email: '', password: '', read: false as unknown as true },
  });
  const words = wordsFor(form.formState.errors);
  return (
    <AccountFrame title="Sign up">
      <form className="grid gap-4" noValidate onSubmit={form.handleSubmit((values) => enter.mutate(values))}>
        <TextField label="your name" autoComplete="name" {...form.register('name')} error={words.name} />
        <TextField
          label="team"
          autoComplete="organization"
          {...form.register('teamName')}
          error={words.teamName}
          hint="You become its manager."
        />
        <TextField label="email" type="email" autoComplete="username" {...form.register('email')} error={words.email} />
        <TextField
          label="password"
          type="password"
          autoComplete="new-password"
          {...form.register('password')}
          error={words.password}
          hint={`At least ${PASSWORD_MIN} characters; a sentence is best.`}
        />
        <section aria-labelledby="cautions-title" className="grid gap-3 py-2">
          <h2 id="cautions-title" className="text-xl font-bold">
            Before you begin
          </h2>
          <Cautions />
          <label className="flex min-h-11 items-center gap-3 font-bold">
            <input
              type="checkbox"
              className="size-6 accent-[var(--ink)]"
              {...form.register('read')}
              aria-invalid={words.read !== undefined}
              aria-describedby="read-more"
            />
            I have read these cautions and keep to them.
          </label>
          <p id="read-more" role="alert" className={words.read === undefined ? 'spoken-only' : 'border-fault border-l-4 pl-2'}>
            {words.read}
          </p>
        </section>
        {enter.isError ? <FailureNotice error={enter.error} /> : null}
        <div className="flex flex-wrap items-center gap-4">
          <Button kind="main" type="submit" busy={enter.isPending}>
            sign up
          </Button>
          <Link className="underline underline-offset-4" to="/sign-in">
            sign in instead
          </Link>
        </div>
      </form>
    </AccountFrame>
  );
}

function wordsFor(errors: FieldErrors<SignUpForm>) {
  return {
    name: errors.name && 'Type the name the crew knows you by.',
    teamName: errors.teamName && 'Type the name of your team.',
    email: errors.email && 'Type an address that can receive mail.',
    password: errors.password && `Choose at least ${PASSWORD_MIN} characters.`,
    read: errors.read && 'Read the cautions and tick the box to go on.',
  };
}
