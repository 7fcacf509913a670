/** Pictures of what the panel shows, for files. */

const drawn = ['fill', 'stroke', 'stroke-width', 'stroke-dasharray', 'opacity', 'font-size', 'font-family'];

/** A drawing with the style sheet's rules written into it. */
export function standalone(svg: SVGElement): string {
  const copy = svg.cloneNode(true) as SVGElement;
  const [from, to] = [[svg, ...svg.querySelectorAll('*')], [copy, ...copy.querySelectorAll('*')]];
  from.forEach((source, i) => {
    const style = getComputedStyle(source);
    for (const property of drawn) to[i]!.setAttribute(property, style.getPropertyValue(property));
    to[i]!.removeAttribute('class');
  });
  return new XMLSerializer().serializeToString(copy);
}

export function base64(text: string): string {
  return btoa(String.fromCharCode(...new TextEncoder().encode(text)));
}

/** The same drawing as a bitmap of twice its size, on the page's background. */
export async function asPng(svg: string, width: number, height: number): Promise<string> {
  const image = new Image();
  image.src = `data:image/svg+xml;base64,${base64(svg)}`;
  await image.decode();
  const canvas = document.createElement('canvas');
  canvas.width = 2 * width;
  canvas.height = 2 * height;
  const context = canvas.getContext('2d')!;
  context.fillStyle = getComputedStyle(document.body).backgroundColor;
  context.fillRect(0, 0, canvas.width, canvas.height);
  context.drawImage(image, 0, 0, canvas.width, canvas.height);
  return canvas.toDataURL('image/png').split(',')[1]!;
}

/** Several canvases below each other. */
export function stacked(canvases: readonly HTMLCanvasElement[]): string {
  const out = document.createElement('canvas');
  out.width = Math.max(...canvases.map((c) => c.width));
  out.height = canvases.reduce((sum, c) => sum + c.height, 0);
  const context = out.getContext('2d')!;
  context.fillStyle = getComputedStyle(document.body).backgroundColor;
  context.fillRect(0, 0, out.width, out.height);
  let y = 0;
  for (const c of canvases) {
    context.drawImage(c, 0, y);
    y += c.height;
  }
  return out.toDataURL('image/png').split(',')[1]!;
}
