import type { Theme } from '@visviva/shared';
import * as vscode from 'vscode';

/** A colour for text that is read on the theme's background: the theme's own colours are not told to extensions. */
export function currentTheme(): Theme {
  switch (vscode.window.activeColorTheme.kind) {
    case vscode.ColorThemeKind.Light:
      return { text: '#1f1f1f' };
    case vscode.ColorThemeKind.HighContrastLight:
      return { text: '#000000' };
    case vscode.ColorThemeKind.HighContrast:
      return { text: '#ffffff' };
    default:
      return { text: '#d4d4d4' };
  }
}
