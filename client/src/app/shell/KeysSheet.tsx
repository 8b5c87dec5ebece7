import { Button, Kbd, Modal, Switch } from '@mantine/core';
import { useDisclosure, useHotkeys, useLocalStorage } from '@mantine/hooks';
import classes from './shell.module.css';

interface Group {
  readonly where: string;
  readonly keys: readonly (readonly [keys: string, does: string])[];
}

const GROUPS: readonly Group[] = [
  {
    where: 'In the curve, while it has the focus',
    keys: [
      ['← →', 'one pixel; with Shift ten; with Ctrl to the next feature'],
      ['↑ ↓', 'to the staff above or below'],
      ['+ −', 'zoom in, zoom out'],
      ['[ ]', 'view before, view after'],
      ['0', 'whole spectrum'],
      ['Enter', 'select the line at the cursor'],
      ['s e', 'mark the start, the end of a region at the cursor'],
      ['g', 'steer the analysis'],
      ['Esc', 'leave the curve'],
    ],
  },
  {
    where: 'In the curve and in the table of lines',
    keys: [
      ['n p', 'next, previous undecided line'],
      ['1 to 9', 'choose a candidate'],
      ['u', 'not in the list'],
      ['o', 'propose'],
      ['a', 'accept'],
      ['x', 'reject'],
      ['o', 'propose the chosen candidate'],
      ['b', 'back to proposed'],
      ['b', 'open a decided line again'],
      ['r', 'write a remark'],
      ['Ctrl Z', 'take your last decision back'],
    ],
  },
  {
    where: 'Everywhere',
    keys: [
      ['Tab', 'next control; Shift Tab the one before'],
      ['?', 'this sheet'],
    ],
  },
];

/** The sheet of keys, opened by its button or by "?". People whose tools send stray letters can turn the key off. */
export function KeysSheet() {
  const [opened, { open, close, toggle }] = useDisclosure(false);
  const [enabled, setEnabled] = useLocalStorage({ key: 'foreveil-help-key', defaultValue: true, getInitialValueInEffect: false });
  useHotkeys([['shift+?', () => enabled && toggle()]]);
  return (
    <>
      <Button variant="subtle" className={classes.keys} onClick={open} rightSection={<Kbd>?</Kbd>}>
        Keys
      </Button>
      <Modal opened={opened} onClose={close} title="Keys" size="md">
        {GROUPS.map(({ where, keys }) => (
          <section key={where} className={classes.sheet}>
            <h3>{where}</h3>
            <dl>
              {keys.map(([key, does]) => (
                <div key={key}>
                  <dt>
                    <Kbd>{key}</Kbd>
                  </dt>
                  <dd>{does}</dd>
                </div>
              ))}
            </dl>
          </section>
        ))}
        <Switch checked={enabled} onChange={(event) => setEnabled(event.currentTarget.checked)} label="Open this sheet with ?" />
      </Modal>
    </>
  );
}
