import type { PanelData } from './panel';

/** What the extension tells the page inside the panel. */
export type ToPage =
  | { readonly kind: 'data'; readonly data: PanelData }
  /** Nothing to show, and what to do about it. */
  | { readonly kind: 'empty'; readonly title: string; readonly hint: string; readonly action?: { readonly label: string; readonly command: string } };

/** What the page asks of the extension. */
export type FromPage =
  | { readonly kind: 'ready' }
  /** Lines and columns from 1. */
  | { readonly kind: 'reveal'; readonly uri: string; readonly line: number; readonly column: number }
  | { readonly kind: 'command'; readonly command: string }
  | { readonly kind: 'save'; readonly name: string; readonly type: 'svg' | 'png'; readonly base64: string };
