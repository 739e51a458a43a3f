import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router';
import { type SignInRequest, signInRequestSchema } from '#shared/api/auth.ts';
import { signIn } from '#src/api/auth/sign-in.ts';
import { Button } from '#src/components/button.tsx';
import { TextField } from '#src/components/field.tsx';
import { FailureNotice } from '#src/paddock/parts/failure-notice.tsx';
import { AccountFrame } from './account-frame.tsx';
import { useEnter } from './use-enter.ts';

export function SignInPage() {
  const enter = useEnter(signIn);
  const form = useForm<SignInRequest>({ resolver: zodResolver(signInRequestSchema), defaultValues: { email: '', password: '' } });
  const { errors } = form.formState;
  return (
    <AccountFrame title="Sign in">
      <form className="grid gap-4" noValidate onSubmit={form.handleSubmit((values) => enter.mutate(values))}>
        <TextField
          label="email"
          type="email"
          autoComplete="username"
          {...form.register('email')}
          error={errors.email && 'Type the address you signed up with.'}
        />
        <TextField
          label="password"
          type="password"
          autoComplete="current-password"
          {...form.register('password')}
          error={errors.password && 'Type your password.'}
        />
        {enter.isError ? <FailureNotice error={enter.error} /> : null}
        <div className="flex flex-wrap items-center gap-4">
          <Button kind="main" type="submit" busy={enter.isPending}>
            sign in
          </Button>
          <Link className="underline underline-offset-4" to="/sign-up">
            new here: sign up
          </Link>
        </div>
      </form>
    </AccountFrame>
  );
}
