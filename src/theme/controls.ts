import type { ButtonProps, InputProps } from 'naive-ui';

type ButtonOverrides = NonNullable<ButtonProps['themeOverrides']>;
type InputOverrides = NonNullable<InputProps['themeOverrides']>;

// Naive computes nothing from what stands here, so tokens may: light and dark follow by themselves.
function button(fill: string, words: string, edge: string): ButtonOverrides {
  const border = `2px solid ${edge}`;
  return {
    color: fill,
    colorHover: fill,
    colorPressed: fill,
    colorFocus: fill,
    colorDisabled: 'transparent',
    textColor: words,
    textColorHover: words,
    textColorPressed: words,
    textColorFocus: words,
    textColorDisabled: 'var(--ink-3)',
    border,
    borderHover: border,
    borderPressed: border,
    borderFocus: border,
    borderDisabled: '2px dashed var(--line-strong)',
  };
}

/** Looks of a button. paper, paperline: on manila or stub. steel: on the dark bars. brass: the bell. */
export const BUTTON_KINDS = {
  solid: button('var(--ink)', 'var(--on-ink)', 'var(--ink)'),
  line: button('transparent', 'var(--ink)', 'var(--ink)'),
  paper: button('var(--paper-ink)', '#fbf0d2', 'var(--paper-ink)'),
  paperline: button('transparent', 'var(--paper-ink)', 'var(--paper-ink)'),
  steel: button('transparent', 'var(--on-steel)', 'var(--on-steel)'),
  brass: button('var(--brass)', 'var(--on-brass)', 'var(--brass)'),
} as const;

export type ButtonKind = keyof typeof BUTTON_KINDS;

const FIELD = '#fff8e4';
const PAPER_FAULT = '3px solid var(--rust-on-paper)';

/** A field on manila or stub paper, which stays light by night. */
export const PAPER_INPUT: InputOverrides = {
  borderRadius: '6px',
  color: FIELD,
  colorHover: FIELD,
  colorFocus: FIELD,
  colorFocusError: FIELD,
  textColor: 'var(--paper-ink)',
  caretColor: 'var(--paper-ink)',
  caretColorError: 'var(--paper-ink)',
  placeholderColor: 'var(--paper-ink-2)',
  border: '2px solid var(--paper-ink-2)',
  borderHover: '2px solid var(--paper-ink)',
  borderFocus: '2px solid var(--paper-ink)',
  boxShadowFocus: '0 0 0 3px var(--paper-ink)',
  borderError: PAPER_FAULT,
  borderHoverError: PAPER_FAULT,
  borderFocusError: PAPER_FAULT,
  boxShadowFocusError: '0 0 0 3px var(--rust-on-paper)',
};
