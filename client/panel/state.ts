import type { PanelData, PanelSymbol } from '@visviva/shared';
import { element, number } from './elements';

/** Values of all symbols, in the panel's order, and the sliders that move them. */
export class State {
  values: number[] = [];
  private symbols: readonly PanelSymbol[] = [];
  private key = '';

  constructor(private readonly changed: () => void) {}

  /** Takes the start of new data; what the user moved stays while it is the same function with the same start. */
  take(data: PanelData): void {
    const key = JSON.stringify([data.uri, data.system, data.function, data.symbols.map((s) => [s.name, s.value])]);
    this.symbols = data.symbols;
    if (key !== this.key) this.values = data.symbols.map((s) => s.value);
    this.key = key;
  }

  reset(): void {
    this.values = this.symbols.map((s) => s.value);
  }

  sliders(): HTMLElement {
    const groups: readonly (readonly [string, readonly PanelSymbol['kind'][]])[] = [
      ['Start', ['coordinate', 'velocity']],
      ['Parameters', ['parameter']],
      ['Inputs', ['input', 'time']],
    ];
    const holder = element('div', { class: 'sliders' });
    for (const [name, kinds] of groups) {
      const own = this.symbols.map((s, i) => [s, i] as const).filter(([s]) => kinds.includes(s.kind));
      if (own.length === 0) continue;
      holder.append(element('fieldset', {}, element('legend', {}, name), ...own.map(([s, i]) => this.slider(s, i))));
    }
    return holder;
  }

  private slider(s: PanelSymbol, i: number): HTMLElement {
    const id = `symbol-${i}`;
    const range = element('input', { type: 'range', id, min: String(s.low), max: String(s.high), step: String((s.high - s.low) / 200) });
    range.value = String(this.values[i]!);
    const output = element('output', { for: id }, shown(s, this.values[i]!));
    range.setAttribute('aria-valuetext', output.value);
    range.addEventListener('input', () => {
      this.values[i] = Number(range.value);
      output.value = shown(s, this.values[i]);
      range.setAttribute('aria-valuetext', output.value);
      this.changed();
    });
    return element('div', { class: 'slider' }, element('label', { for: id, title: s.remark }, s.name), range, output);
  }
}

function shown(s: PanelSymbol, value: number): string {
  return s.unit && s.unit !== '1' ? `${number(value, 3)} ${s.unit}` : number(value, 3);
}
