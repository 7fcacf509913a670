import { liteAdaptor } from 'mathjax-full/js/adaptors/liteAdaptor.js';
import type { LiteDocument } from 'mathjax-full/js/adaptors/lite/Document.js';
import type { LiteElement } from 'mathjax-full/js/adaptors/lite/Element.js';
import type { LiteText } from 'mathjax-full/js/adaptors/lite/Text.js';
import { RegisterHTMLHandler } from 'mathjax-full/js/handlers/html.js';
import { TeX } from 'mathjax-full/js/input/tex.js';
import 'mathjax-full/js/input/tex/ams/AmsConfiguration.js';
import 'mathjax-full/js/input/tex/noundefined/NoUndefinedConfiguration.js';
import { mathjax } from 'mathjax-full/js/mathjax.js';
import { SVG } from 'mathjax-full/js/output/svg.js';

/** Equations as drawings that need no font and no script, with their style kept in classes. */
export class Typesetter {
  private readonly adaptor = liteAdaptor();
  private readonly drawing = new SVG<LiteElement, LiteText, LiteDocument>({ fontCache: 'global' });
  private readonly document;
  private readonly classes = new Map<string, string>();

  constructor() {
    RegisterHTMLHandler(this.adaptor);
    this.document = mathjax.document('', {
      InputJax: new TeX({ packages: ['base', 'ams', 'noundefined'] }),
      OutputJax: this.drawing,
    });
  }

  /**
   * @param spoken what the drawing says to those who do not see it
   */
  draw(tex: string, spoken: string, display = false): string {
    const container = this.document.convert(tex, { display }) as LiteElement;
    const svg = this.adaptor.innerHTML(container).replace(/ style="([^"]*)"/g, (_, style: string) => ` class="${this.classFor(style)}"`);
    return `<span class="math${display ? ' display' : ''}" role="img" aria-label="${attribute(spoken)}">${svg}</span>`;
  }

  /** The outlines of all letters drawn so far, which the drawings refer to. */
  get letters(): string {
    return `<svg class="letters" aria-hidden="true">${this.adaptor.innerHTML(this.drawing.fontCache.getCache())}</svg>`;
  }

  /** The rules of the classes used so far: a strict policy allows no style in attributes. */
  get rules(): string {
    return [...this.classes].map(([style, name]) => `.${name}{${style}}`).join('\n');
  }

  private classFor(style: string): string {
    const known = this.classes.get(style);
    if (known) return known;
    const name = `m${this.classes.size}`;
    this.classes.set(style, name);
    return name;
  }
}

function attribute(text: string): string {
  return text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('"', '&quot;');
}
