import { useEffect, useRef, useState } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { ArrowRight, Eye, EyeOff } from 'lucide-react';
import { useForm } from 'react-hook-form';
import { SignIn, type Session } from '#contract/session.ts';
import { ApiError } from '../../../api/api-error.ts';
import { Button } from '../../../ui/button.tsx';
import { TextField } from '../../../ui/field.tsx';
import { Message } from '../../../ui/message.tsx';
import { useSignIn } from '../session-queries.ts';

/** One message for a wrong pair, without a hint which of the two it is. */
export function SignInForm({ onSignedIn }: { onSignedIn: (session: Session) => void }) {
  const signIn = useSignIn();
  const [shown, setShown] = useState(false);
  const failure = useRef<HTMLDivElement>(null);
  const {
    register,
    handleSubmit,
    formState: { errors },
  } = useForm<SignIn>({ resolver: zodResolver(SignIn), defaultValues: { email: '', password: '' } });

  useEffect(() => {
    if (signIn.isError) failure.current?.focus();
  }, [signIn.isError]);

  return (
    <section
      aria-labelledby="sign-in-title"
      className="rounded-3 border border-rule bg-sheet px-7 pt-6 pb-6.5 shadow-2 max-rail:p-4.5"
    >
      <h1 id="sign-in-title" className="mb-3.5 text-24">
        Sign in
      </h1>
      <form
        noValidate
        onSubmit={(event) => void handleSubmit((values) => signIn.mutate(values, { onSuccess: onSignedIn }))(event)}
      >
        <div ref={failure} tabIndex={-1} className="outline-none">
          {signIn.isError && (
            <Message tone="error" className="mb-4">
              {signIn.error.message}
              {signIn.error instanceof ApiError && signIn.error.code === 'internal' && (
                <span className="block text-12 text-ink-2">Request {signIn.error.requestId}</span>
              )}
            </Message>
          )}
        </div>
        <TextField
          label="E-mail"
          type="email"
          autoComplete="username"
          autoFocus
          height="tall"
          error={errors.email?.message}
          className="mb-4"
          {...register('email')}
        />
        <div className="relative mb-4.5">
          <TextField
            label="Password"
            type={shown ? 'text' : 'password'}
            autoComplete="current-password"
            height="tall"
            error={errors.password?.message}
            {...register('password')}
          />
          <button
            type="button"
            aria-label={shown ? 'Hide password' : 'Show password'}
            onClick={() => setShown(!shown)}
            className="absolute top-6.5 right-2 flex h-9 items-center gap-1.5 rounded-1 bg-sheet px-1.5 text-13 font-bold text-link"
          >
            {shown ? (
              <EyeOff size={16} strokeWidth={1.75} aria-hidden />
            ) : (
              <Eye size={16} strokeWidth={1.75} aria-hidden />
            )}
            {shown ? 'Hide' : 'Show'}
          </button>
        </div>
        <Button
          type="submit"
          variant="filled"
          size="large"
          trailingIcon={ArrowRight}
          pending={signIn.isPending}
          className="w-full"
        >
          Sign in
        </Button>
      </form>
    </section>
  );
}
