import { Menu, UnstyledButton, useMantineColorScheme, type MantineColorScheme } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { hasMedium, type Medium } from '@foreveil/shared';
import { Link, useNavigate } from 'react-router-dom';
import { Initials } from '../../components/Initials.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries, signOut } from '../../lib/queries/account.js';
import { UNIT_LABEL, useWavelengthDisplay } from '../../lib/wavelength.js';
import classes from './shell.module.css';

const SCHEMES: Record<MantineColorScheme, string> = { auto: 'As the system', light: 'Day', dark: 'Night' };
const MEDIA: Record<Medium, string> = { vacuum: 'vacuum', air: 'air' };

export function AccountMenu() {
  const me = useQuery(accountQueries.me()).data;
  const leave = useSignOut();
  if (!me) return null;
  return (
    <Menu position="bottom-end" width={248}>
      <Menu.Target>
        <UnstyledButton className={classes.account} aria-label={`Account of ${me.name}`}>
          <Initials name={me.name} self />
        </UnstyledButton>
      </Menu.Target>
      <Menu.Dropdown>
        <div className={classes.who}>
          <b>{me.name}</b>
          <span>{me.email}</span>
        </div>
        <Menu.Divider />
        <Menu.Item component={Link} to={pagePaths.account}>
          Your account
        </Menu.Item>
        {me.administrator && (
          <Menu.Item component={Link} to={pagePaths.admin}>
            Accounts of this site
          </Menu.Item>
        )}
        <SchemeChoice />
        <WavelengthChoice />
        <Menu.Divider />
        <Menu.Item onClick={() => leave.mutate()}>Sign out</Menu.Item>
      </Menu.Dropdown>
    </Menu>
  );
}

function useSignOut() {
  const client = useQueryClient();
  const navigate = useNavigate();
  return useMutation({
    mutationFn: signOut,
    onSuccess: async () => {
      await navigate(pagePaths.signIn);
      client.clear();
    },
    onError: (error) => notifications.show({ title: 'Still signed in', message: errorSentence(error) }),
  });
}

interface ChoicesProps<V extends string> {
  label: string;
  words: Record<V, string>;
  value: V;
  onChoose: (value: V) => void;
}

function Choices<V extends string>({ label, words, value, onChoose }: ChoicesProps<V>) {
  return (
    <>
      <Menu.Divider />
      <Menu.Label>{label}</Menu.Label>
      <Menu.RadioGroup value={value} onChange={(chosen) => onChoose(chosen as V)}>
        {(Object.entries(words) as [V, string][]).map(([one, word]) => (
          <Menu.RadioItem key={one} value={one}>
            {word}
          </Menu.RadioItem>
        ))}
      </Menu.RadioGroup>
    </>
  );
}

function SchemeChoice() {
  const { colorScheme, setColorScheme } = useMantineColorScheme();
  return <Choices label="Appearance" words={SCHEMES} value={colorScheme} onChoose={setColorScheme} />;
}

/** How wavelengths are shown on every page; stored values never change. */
function WavelengthChoice() {
  const { unit, medium, setUnit, setMedium } = useWavelengthDisplay();
  return (
    <>
      <Choices label="Wavelengths shown in" words={UNIT_LABEL} value={unit} onChoose={setUnit} />
      {hasMedium(unit) && <Choices label="Wavelengths shown for" words={MEDIA} value={medium} onChoose={setMedium} />}
    </>
  );
}
