import { Button, PasswordInput, TextInput } from '@mantine/core';
import { useForm } from '@mantine/form';
import type { Me, SignIn } from '@foreveil/shared';
import { useMutation } from '@tanstack/react-query';
import { useRef } from 'react';
import { ErrorNote } from '../../components/ErrorNote.js';
import { signIn } from '../../lib/queries/account.js';
import classes from './sign-in.module.css';

interface Props {
  /** whom the browser remembers here */
  email?: string;
  onSignedIn: (me: Me) => void;
}

/** E-mail and password. Pasting and password managers work: plain fields with the names that browsers know. */
export function SignInForm({ email = '', onSignedIn }: Props) {
  const form = useForm<SignIn>({
    mode: 'uncontrolled',
    initialValues: { email, password: '' },
    validate: {
      email: (value) => (/^\S+@\S+$/.test(value.trim()) ? null : 'Write your e-mail address, as in name@example.org.'),
      password: (value) => (value ? null : 'Write your password.'),
    },
  });
  const password = useRef<HTMLInputElement>(null);
  const send = useMutation({
    mutationFn: signIn,
    onSuccess: onSignedIn,
    onError: () => password.current?.select(),
  });
  const submit = form.onSubmit(
    (values) => send.mutate({ ...values, email: values.email.trim() }),
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
      {send.isError && <ErrorNote error={send.error} />}
      <Button type="submit" variant="filled" loading={send.isPending} className={classes.act}>
        Sign in
      </Button>
    </form>
  );
}
