import { Button, PasswordInput, TextInput } from '@mantine/core';
import { useForm } from '@mantine/form';
import type { Me, SignIn } from '@foreveil/shared';
import { useMutation } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { isApiError } from '../../lib/api-error.js';
import { signIn } from '../../lib/queries/account.js';
import classes from './sign-in.module.css';

const needsCode = (error: unknown) => isApiError(error, 'second_factor_needed') || isApiError(error, 'wrong_code');

interface Props {
  /** whom the browser remembers here */
  email?: string;
  onSignedIn: (me: Me) => void;
}

/** E-mail and password. Pasting and password managers work: plain fields with the names that browsers know. */
export function SignInForm({ email = '', onSignedIn }: Props) {
  const form = useForm<SignIn>({
    mode: 'uncontrolled',
    initialValues: { email, password: '', code: '' },
    validate: {
      email: (value) => (/^\S+@\S+$/.test(value.trim()) ? null : 'Write your e-mail address, as in name@example.org.'),
      password: (value) => (value ? null : 'Write your password.'),
    },
  });
  const password = useRef<HTMLInputElement>(null);
  const [asksCode, setAsksCode] = useState(false);
  const send = useMutation({
    mutationFn: signIn,
    onSuccess: onSignedIn,
    onError: (error) => {
      if (needsCode(error)) setAsksCode(true);
      else password.current?.select();
    },
  });
  const submit = form.onSubmit(
    ({ code, ...values }) => send.mutate({ ...values, email: values.email.trim(), ...(code?.trim() ? { code: code.trim() } : {}) }),
    (errors) => form.getInputNode(Object.keys(errors)[0] ?? '')?.focus(),
  );
  return (
    <form className={classes.form} onSubmit={submit} noValidate>
      <TextInput
        label="E-mail"
        type="email"
        name="email"
        autoComplete="username"
        autoCapitalize="none"
        spellCheck={false}
        size="lg"
        {...form.getInputProps('email')}
        key={form.key('email')}
      />
      <PasswordInput
        label="Password"
        name="password"
        autoComplete="current-password"
        size="lg"
        ref={password}
        visibilityToggleButtonProps={{ 'aria-label': 'Show the password' }}
        {...form.getInputProps('password')}
        key={form.key('password')}
      />
      {asksCode && (
        <TextInput
          label="Code of your authenticator app, or a recovery code"
          name="code"
          autoComplete="one-time-code"
          autoFocus
          size="lg"
          {...form.getInputProps('code')}
          key={form.key('code')}
        />
      )}
      {send.isError && <ErrorNote error={send.error} />}
      <Button type="submit" variant="filled" loading={send.isPending} className={classes.act}>
        Sign in
      </Button>
    </form>
  );
}
