import type { GlobalThemeOverrides } from 'naive-ui';

interface Palette {
  ink: string;
  ink2: string;
  ink3: string;
  onInk: string;
  pressed: string;
  ground: string;
  sheet: string;
  sunk: string;
  line: string;
  lineStrong: string;
  chalk: string;
  pass: string;
  rust: string;
}

// Hex, not `var()`: Naive computes shades from them. Same values as in tokens.css.
const LIGHT: Palette = {
  ink: '#131C1A',
  ink2: '#3B4744',
  ink3: '#52605C',
  onInk: '#FCFDFC',
  pressed: '#000000',
  ground: '#E6EBE9',
  sheet: '#FCFDFC',
  sunk: '#F1F4F2',
  line: '#C3CCC9',
  lineStrong: '#6B7875',
  chalk: '#1E3DB4',
  pass: '#1A6340',
  rust: '#8F3600',
};
const DARK: Palette = {
  ink: '#F1F5F2',
  ink2: '#C6D0CC',
  ink3: '#A3B0AB',
  onInk: '#131C1A',
  pressed: '#FFFFFF',
  ground: '#121918',
  sheet: '#1B2423',
  sunk: '#151D1C',
  line: '#35423F',
  lineStrong: '#80908A',
  chalk: '#A3B8FF',
  pass: '#86D6AA',
  rust: '#FFB27A',
};

const FONT = "'Nunito', system-ui, sans-serif";
const MONO = "'Martian Mono', ui-monospace, monospace";

function common(p: Palette): GlobalThemeOverrides['common'] {
  return {
    fontFamily: FONT,
    fontFamilyMono: MONO,
    fontWeightStrong: '800',
    fontSize: '16px',
    fontSizeMedium: '16px',
    lineHeight: '1.5',
    borderRadius: '8px',
    borderRadiusSmall: '6px',
    heightSmall: '44px',
    heightMedium: '48px',
    heightLarge: '56px',
    baseColor: p.onInk,
    primaryColor: p.ink,
    primaryColorHover: p.ink2,
    primaryColorPressed: p.pressed,
    primaryColorSuppl: p.ink2,
    infoColor: p.chalk,
    successColor: p.pass,
    warningColor: p.rust,
    errorColor: p.rust,
    textColorBase: p.ink,
    textColor1: p.ink,
    textColor2: p.ink,
    textColor3: p.ink3,
    placeholderColor: p.ink3,
    bodyColor: p.ground,
    cardColor: p.sheet,
    modalColor: p.sheet,
    popoverColor: p.sheet,
    inputColor: p.sheet,
    borderColor: p.lineStrong,
    dividerColor: p.line,
    boxShadow1: 'none',
    boxShadow2: '0 2px 4px rgba(19,28,26,.18)',
    boxShadow3: '0 10px 20px rgba(19,28,26,.28)',
  };
}

function overrides(p: Palette): GlobalThemeOverrides {
  const control = {
    border: `2px solid ${p.lineStrong}`,
    borderHover: `2px solid ${p.ink}`,
    borderFocus: `2px solid ${p.ink}`,
    boxShadowFocus: `0 0 0 3px ${p.ink}`,
  };
  return {
    common: common(p),
    Button: {
      fontWeight: '800',
      heightSmall: '44px',
      heightMedium: '48px',
      heightLarge: '56px',
      borderRadiusMedium: '8px',
      border: `2px solid ${p.ink}`,
    },
    Input: control,
    InternalSelection: control,
    Radio: {
      buttonHeightMedium: '46px',
      buttonBorderRadius: '6px',
      buttonBorderColor: p.ink,
      buttonColorActive: p.ink,
      buttonTextColorActive: p.onInk,
      labelFontWeight: '700',
    },
    Checkbox: { sizeMedium: '24px', colorChecked: p.ink, borderChecked: `2px solid ${p.ink}` },
    Switch: { railColorActive: p.ink },
    Form: { labelFontWeight: '800', labelTextColor: p.ink },
    DataTable: { thColor: 'transparent', thFontWeight: '800', tdColorHover: p.sunk, borderRadius: '0' },
    Steps: {
      stepHeaderFontWeight: '800',
      indicatorColorProcess: p.ink,
      indicatorBorderColorFinish: p.ink,
    },
    Tabs: { barColor: p.ink, tabFontWeightActive: '900' },
    Dialog: { borderRadius: '2px' },
    Drawer: { borderRadius: '2px' },
  };
}

/** Naive UI in the identity of the shop wall, light. */
export const lightOverrides = overrides(LIGHT);
/** The same by night. */
export const darkOverrides = overrides(DARK);
