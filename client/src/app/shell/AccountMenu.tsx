import { Menu, UnstyledButton, useMantineColorScheme, type MantineColorScheme } from '@mantine/core';
import { notifications } from '@mantine/notifications';
import { IconCheck } from '@tabler/icons-react';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { Medium, WavelengthUnit } from '@foreveil/shared';
import { useNavigate } from 'react-router-dom';
import { Initials } from '../../components/Initials.js';
import { errorSentence } from '../../lib/error-sentences.js';
import { pagePaths } from '../../lib/paths.js';
import { accountQueries, signOut } from '../../lib/queries/account.js';
import { UNIT_LABEL, useWavelengthDisplay } from '../../lib/wavelength.js';
import classes from './shell.module.css';

const SCHEMES: Record<MantineColorScheme, string> = { auto: 'As the system', light: 'Day', dark: 'Night' };
const MEDIA: Record<Medium, string> = { vacuum: 'in vacuum', air: 'in air' };

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

interface ChoiceProps {
  checked: boolean;
  label: string;
  onChoose: () => void;
}

function Choice({ checked, label, onChoose }: ChoiceProps) {
  const mark = checked ? <IconCheck size={14} aria-hidden /> : <span />;
  return (
    <Menu.Item role="menuitemradio" aria-checked={checked} closeMenuOnClick={false} onClick={onChoose} rightSection={mark}>
      {label}
    </Menu.Item>
  );
}

function SchemeChoice() {
  const { colorScheme, setColorScheme } = useMantineColorScheme();
  return (
    <>
      <Menu.Divider />
      <Menu.Label>Appearance</Menu.Label>
      {(Object.keys(SCHEMES) as MantineColorScheme[]).map((scheme) => (
        <Choice key={scheme} label={SCHEMES[scheme]} checked={scheme === colorScheme} onChoose={() => setColorScheme(scheme)} />
      ))}
    </>
  );
}

/** How wavelengths are shown on every page; stored values never change. */
function WavelengthChoice() {
  const { unit, medium, setUnit, setMedium } = useWavelengthDisplay();
  return (
    <>
      <Menu.Divider />
      <Menu.Label>Wavelengths shown</Menu.Label>
      {(Object.keys(UNIT_LABEL) as WavelengthUnit[]).map((one) => (
        <Choice key={one} label={`in ${UNIT_LABEL[one]}`} checked={one === unit} onChoose={() => setUnit(one)} />
      ))}
      {unit !== 'wavenumber' &&
        (Object.keys(MEDIA) as Medium[]).map((one) => (
          <Choice key={one} label={MEDIA[one]} checked={one === medium} onChoose={() => setMedium(one)} />
        ))}
    </>
  );
}
