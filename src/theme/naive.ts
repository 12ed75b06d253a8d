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

function input(p: Palette): GlobalThemeOverrides['Input'] {
  const fault = `3px solid ${p.rust}`;
  return {
    heightMedium: '52px',
    fontSizeMedium: '17px',
    paddingMedium: '0 16px',
    lineHeightTextarea: '1.35',
    color: p.sheet,
    colorHover: p.sheet,
    colorFocus: p.sheet,
    colorFocusError: p.sheet,
    caretColorError: p.ink,
    border: `2px solid ${p.lineStrong}`,
    borderHover: `2px solid ${p.ink}`,
    borderFocus: `2px solid ${p.ink}`,
    boxShadowFocus: `0 0 0 3px ${p.ink}`,
    borderError: fault,
    borderHoverError: fault,
    borderFocusError: fault,
    boxShadowFocusError: `0 0 0 3px ${p.rust}`,
  };
}

function overrides(p: Palette): GlobalThemeOverrides {
  return {
    common: common(p),
    Button: {
      fontWeight: '800',
      heightSmall: '44px',
      heightMedium: '48px',
      heightLarge: '56px',
      borderRadiusSmall: '8px',
      borderRadiusMedium: '8px',
      borderRadiusLarge: '8px',
      border: `2px solid ${p.ink}`,
      fontSizeSmall: '15px',
      fontSizeMedium: '17px',
      fontSizeLarge: '18px',
      paddingSmall: '0 16px',
      paddingMedium: '0 24px',
      paddingLarge: '0 28px',
      opacityDisabled: '1',
      // No ripple: metal gives way by a pixel, as every button here does.
      waveOpacity: '0',
    },
    Input: input(p),
    Radio: {
      radioSizeMedium: '24px',
      fontSizeMedium: '17px',
      labelPadding: '0 0 0 12px',
      boxShadow: `inset 0 0 0 2px ${p.lineStrong}`,
      boxShadowActive: `inset 0 0 0 2px ${p.ink}`,
      boxShadowHover: `inset 0 0 0 2px ${p.ink}`,
      color: p.sheet,
      buttonHeightMedium: '46px',
      buttonBorderRadius: '6px',
      buttonBorderColor: p.ink,
      buttonColorActive: p.ink,
      buttonColor: 'transparent',
      buttonTextColor: p.ink,
      buttonTextColorHover: p.ink,
      buttonTextColorActive: p.onInk,
      labelFontWeight: '700',
    },
    Checkbox: {
      sizeMedium: '24px',
      fontSizeMedium: '17px',
      labelPadding: '0 0 0 12px',
      color: p.sheet,
      colorChecked: p.ink,
      checkMarkColor: p.onInk,
      border: `2px solid ${p.lineStrong}`,
      borderChecked: `2px solid ${p.ink}`,
      borderFocus: `2px solid ${p.ink}`,
      // The focus frames the whole line, as large as the finger's target.
      boxShadowFocus: 'none',
    },
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
    Message: { border: `2px solid ${p.ink}`, borderRadius: '2px', fontSize: '16px' },
    Drawer: { borderRadius: '2px' },
  };
}

/** Naive UI in the identity of the shop wall, light. */
export const lightOverrides = overrides(LIGHT);
/** The same by night. */
export const darkOverrides = overrides(DARK);
