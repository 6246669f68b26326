/**
 * Our tokens as Naive UI's theme. Only the common variables and a few components are set; all others are derived from the
 * common ones. Naive's own dark theme is not used, since it would bring the styles of every component into the first page.
 */
import type { GlobalThemeOverrides } from 'naive-ui';
import type { Tokens } from './tokens.ts';

export const FONT = "'Work Sans', system-ui, sans-serif";

export function naiveTheme(t: Tokens): GlobalThemeOverrides {
  const floating = `0 6px 24px ${t.shade}`;
  const field = { border: `1px solid ${t.edge}`, borderHover: `1px solid ${t.ink}`, borderFocus: `1px solid ${t.ink}`, boxShadowFocus: `0 0 0 2px ${t.wash}` };
  return {
    common: {
      fontFamily: FONT, fontFamilyMono: FONT, fontWeight: '400', fontWeightStrong: '600',
      fontSize: '15px', fontSizeSmall: '14px', fontSizeMedium: '15px', fontSizeLarge: '16px', lineHeight: '1.5',
      borderRadius: '6px', borderRadiusSmall: '4px',
      heightSmall: '32px', heightMedium: '40px', heightLarge: '48px',
      baseColor: t.onInk,
      primaryColor: t.ink, primaryColorHover: t.inkHover, primaryColorPressed: t.inkPressed, primaryColorSuppl: t.inkHover,
      infoColor: t.ink, infoColorHover: t.inkHover, infoColorPressed: t.inkPressed, infoColorSuppl: t.inkHover,
      successColor: t.verdigris, successColorHover: t.verdigris, successColorPressed: t.verdigris, successColorSuppl: t.verdigris,
      warningColor: t.ochre, warningColorHover: t.ochre, warningColorPressed: t.ochre, warningColorSuppl: t.ochre,
      errorColor: t.madder, errorColorHover: t.madder, errorColorPressed: t.madder, errorColorSuppl: t.madder,
      textColorBase: t.ink, textColor1: t.ink, textColor2: t.ink, textColor3: t.soft, textColorDisabled: t.soft,
      placeholderColor: t.soft, placeholderColorDisabled: t.soft,
      iconColor: t.soft, iconColorHover: t.ink, iconColorPressed: t.ink, iconColorDisabled: t.rule,
      closeIconColor: t.soft, closeIconColorHover: t.ink, closeIconColorPressed: t.ink, closeColorHover: t.wash, closeColorPressed: t.wash,
      clearColor: t.soft, clearColorHover: t.ink, clearColorPressed: t.ink,
      dividerColor: t.rule, borderColor: t.rule, railColor: t.rule, progressRailColor: t.rule,
      bodyColor: t.paper, cardColor: t.sheet, modalColor: t.sheet, popoverColor: t.sheet, tableColor: t.sheet, inputColor: t.sheet,
      inputColorDisabled: t.paper, tableHeaderColor: t.paper, tableColorHover: t.wash, tableColorStriped: t.paper,
      actionColor: t.paper, hoverColor: t.wash, pressedColor: t.wash, tabColor: t.paper, tagColor: t.wash, codeColor: t.paper,
      buttonColor2: t.wash, buttonColor2Hover: t.wash, buttonColor2Pressed: t.rule,
      scrollbarColor: t.rule, scrollbarColorHover: t.edge,
      invertedColor: t.ink, avatarColor: t.wash,
      boxShadow1: floating, boxShadow2: floating, boxShadow3: floating,
    },
    Button: {
      // Plain buttons are outlined: an edge that can be seen, no fill until hovered.
      border: `1px solid ${t.edge}`, borderHover: `1px solid ${t.ink}`, borderFocus: `1px solid ${t.ink}`, borderPressed: `1px solid ${t.ink}`, borderDisabled: `1px solid ${t.rule}`,
      textColorHover: t.ink, textColorFocus: t.ink, textColorPressed: t.ink,
      color: t.sheet, colorHover: t.wash, colorFocus: t.sheet, colorPressed: t.wash,
      waveOpacity: '0', fontWeight: '600',
    },
    Input: field,
    InternalSelection: { ...field, borderActive: `1px solid ${t.ink}`, boxShadowActive: `0 0 0 2px ${t.wash}` },
    Checkbox: { border: `1px solid ${t.edge}` },
    Radio: { boxShadow: `inset 0 0 0 1px ${t.edge}`, buttonBorderColor: t.edge, buttonColorActive: t.ink, buttonTextColorActive: t.onInk },
    Slider: { fillColor: t.ink, fillColorHover: t.ink, handleColor: t.sheet, handleBoxShadow: `0 0 0 2px ${t.ink}`, handleBoxShadowHover: `0 0 0 2px ${t.ink}`, handleBoxShadowActive: `0 0 0 3px ${t.ink}`, handleBoxShadowFocus: `0 0 0 3px ${t.ink}` },
    Switch: { railColor: t.edge, railColorActive: t.verdigris, buttonColor: t.sheet },
    Tooltip: { color: t.ink, textColor: t.onInk },
    DataTable: { thFontWeight: '600', thTextColor: t.soft, borderColor: t.rule },
  };
}
