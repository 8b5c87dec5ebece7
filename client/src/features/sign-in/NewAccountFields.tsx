import { PasswordInput, TextInput } from '@mantine/core';
import { PASSWORD_LENGTH } from '@foreveil/shared';

const reveal = { 'aria-label': 'Show the password' };

export const NameField = () => (
  <TextInput label="Your name" name="name" autoComplete="name" size="lg" maxLength={120} required withAsterisk={false} />
);

export const EmailField = () => (
  <TextInput label="E-mail" name="email" type="email" autoComplete="username" size="lg" required withAsterisk={false} />
);

export const NewPasswordField = ({ label = 'Password' }: { label?: string }) => (
  <PasswordInput
    label={label}
    description={`At least ${PASSWORD_LENGTH.least} characters; a sentence works well.`}
    name="password"
    autoComplete="new-password"
    size="lg"
    required
    withAsterisk={false}
    visibilityToggleButtonProps={reveal}
  />
);

/** What was typed into a form, by the names of its fields. */
export const typed = (form: HTMLFormElement): Record<string, string> =>
  Object.fromEntries([...new FormData(form)].map(([name, value]) => [name, typeof value === 'string' ? value : '']));
