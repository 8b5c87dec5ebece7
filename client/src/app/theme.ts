import {
  createTheme,
  defaultVariantColorsResolver,
  type CSSVariablesResolver,
  type MantineColorsTuple,
  type VariantColorsResolver,
} from '@mantine/core';

/** Our one colour of the interface: ink, from paper to full. There is no blue anywhere. */
const INK: MantineColorsTuple = [
  '#f3f1ea',
  '#e2ded3',
  '#c8c2b4',
  '#a8a294',
  '#87816f',
  '#5f6671',
  '#434a55',
  '#2e343d',
  '#1a1d23',
  '#0e131b',
];

const FONT = "'Inter Variable', system-ui, sans-serif";

/** Ink on paper for `default`, paper on ink for `filled`; what else Mantine offers stays as it is. */
const variants: VariantColorsResolver = (input) => {
  if (input.variant === 'filled')
    return { background: 'var(--act)', hover: 'var(--ink-2)', color: 'var(--on-act)', border: '1px solid transparent' };
  if (input.variant === 'subtle')
    return { background: 'transparent', hover: 'var(--hover)', color: 'var(--ink)', border: '1px solid transparent' };
  return defaultVariantColorsResolver(input);
};

export const theme = createTheme({
  variantColorResolver: variants,
  fontFamily: FONT,
  fontFamilyMonospace: FONT, // figures are tabular everywhere; a second face would only add noise
  headings: { fontFamily: FONT, fontWeight: '620' },
  colors: { ink: INK },
  primaryColor: 'ink',
  primaryShade: { light: 8, dark: 0 },
  autoContrast: true,
  fontSizes: { xs: '12px', sm: '13px', md: '14px', lg: '16px', xl: '20px' },
  lineHeights: { xs: '16px', sm: '18px', md: '20px', lg: '24px', xl: '28px' },
  spacing: { xs: '4px', sm: '8px', md: '12px', lg: '16px', xl: '24px' },
  radius: { xs: '2px', sm: '3px', md: '3px', lg: '6px', xl: '6px' },
  defaultRadius: 'sm',
  shadows: { xs: 'none', sm: 'none', md: 'none', lg: 'none', xl: 'none' },
  breakpoints: { xs: '24em', sm: '37.5em', md: '62em', lg: '80em', xl: '100em' },
  focusRing: 'auto',
  cursorType: 'pointer',
  // honours prefers-reduced-motion
  respectReducedMotion: true,
  components: {
    Button: { defaultProps: { variant: 'default' } },
    ActionIcon: { defaultProps: { variant: 'subtle', size: 28 } },
    CloseButton: { defaultProps: { 'aria-label': 'Close' } },
    Modal: {
      defaultProps: {
        centered: true,
        radius: 'lg',
        closeButtonProps: { 'aria-label': 'Close' },
        overlayProps: { backgroundOpacity: 0.35 },
      },
    },
    Menu: { defaultProps: { position: 'bottom-start', offset: 4, withinPortal: true, withInitialFocusPlaceholder: false } },
    Select: { defaultProps: { comboboxProps: { offset: 2 }, allowDeselect: false, checkIconPosition: 'right' } },
    Tooltip: { defaultProps: { openDelay: 300, multiline: true, maw: 320, events: { hover: true, focus: true, touch: true } } },
    Notification: { defaultProps: { closeButtonProps: { 'aria-label': 'Dismiss' } } },
  },
});

const roles = {
  '--mantine-color-body': 'var(--ground)',
  '--mantine-color-text': 'var(--ink)',
  '--mantine-color-bright': 'var(--ink)',
  '--mantine-color-dimmed': 'var(--ink-3)',
  '--mantine-color-placeholder': 'var(--ink-3)',
  '--mantine-color-anchor': 'var(--ink)',
  '--mantine-color-error': 'var(--ink)', // an error is said in words and with a mark, not in red
  '--mantine-color-default': 'var(--raise)',
  '--mantine-color-default-hover': 'var(--hover)',
  '--mantine-color-default-color': 'var(--ink)',
  '--mantine-color-default-border': 'var(--control)',
  '--mantine-color-disabled': 'var(--sink)',
  '--mantine-color-disabled-color': 'var(--ink-3)',
  '--mantine-color-disabled-border': 'var(--line-2)',
  '--mantine-color-ink-filled': 'var(--act)',
  '--mantine-color-ink-filled-hover': 'var(--ink-2)',
  '--mantine-color-ink-light': 'var(--select)',
  '--mantine-color-ink-light-hover': 'var(--hover)',
  '--mantine-color-ink-light-color': 'var(--ink)',
  '--mantine-color-ink-outline': 'var(--ink)',
  '--mantine-color-ink-text': 'var(--ink)',
  '--mantine-primary-color-contrast': 'var(--on-act)',
};

/** Mantine's roles, worn in ours (tokens.css). */
export const cssVariables: CSSVariablesResolver = () => ({ variables: {}, light: roles, dark: roles });
