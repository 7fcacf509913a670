/** Elements of the page, made without any markup as text but for formulas. */

type Child = Node | string | undefined;

export function element<K extends keyof HTMLElementTagNameMap>(
  tag: K,
  attributes: Readonly<Record<string, string | undefined>> = {},
  ...children: readonly Child[]
): HTMLElementTagNameMap[K] {
  const made = document.createElement(tag);
  for (const [name, value] of Object.entries(attributes)) if (value !== undefined) made.setAttribute(name, value);
  made.append(...children.filter((c) => c !== undefined));
  return made;
}

const svgNamespace = 'http://www.w3.org/2000/svg';

export function shape(tag: string, attributes: Readonly<Record<string, string | number>>, ...children: readonly (Node | string)[]): SVGElement {
  const made = document.createElementNS(svgNamespace, tag);
  for (const [name, value] of Object.entries(attributes)) made.setAttribute(name, String(value));
  made.append(...children);
  return made;
}

/** A formula as a picture with its text for those who do not see it; the text where there is no picture. */
export function formula({ text, svg }: { readonly text: string; readonly svg?: string }): HTMLElement {
  if (svg === undefined) return element('code', {}, text);
  const holder = element('span', { class: 'formula', role: 'img', 'aria-label': text });
  const parsed = new DOMParser().parseFromString(svg, 'image/svg+xml').documentElement;
  parsed.setAttribute('aria-hidden', 'true');
  holder.append(document.importNode(parsed, true));
  return holder;
}

export function button(label: string, click: () => void, attributes: Readonly<Record<string, string>> = {}): HTMLButtonElement {
  const made = element('button', { type: 'button', ...attributes }, label);
  made.addEventListener('click', click);
  return made;
}

export function number(x: number, digits = 4): string {
  if (!Number.isFinite(x)) return '–';
  if (x === 0) return '0';
  const size = Math.abs(x);
  return size >= 1e5 || size < 1e-3 ? x.toExponential(2) : String(Number(x.toPrecision(digits)));
}
