/** Colours of the day theme, for what leaves the screen: print knows no night. */
const DAY: Record<string, string> = {
  ground: '#fbfaf7', ink: '#1a1d23', 'ink-2': '#434a55', 'ink-3': '#5f6671', control: '#87816f', hatch: '#c4bfb3', line: '#e2ded3', 'line-2': '#c8c2b4',
  stellar: '#b84a00', interstellar: '#0072b2', nebular: '#007a5a', telluric: '#8a4f73', curve: '#1a1d23', cont: '#5f6671', select: '#ece7d8',
}; // prettier-ignore

/** A drawing of the page as an SVG file of its own, in day colours on the day's ground. */
export function figureText(svg: SVGSVGElement): string {
  const text = new XMLSerializer().serializeToString(svg);
  const coloured = text.replace(/var\(--([a-z0-9-]+)\)/g, (_, name: string) => DAY[name] ?? DAY['ink']!);
  return coloured.replace(/(<svg[^>]*>)/, `$1<rect width="100%" height="100%" fill="${DAY['ground']}"/>`);
}

export function saveFigure(svg: SVGSVGElement, fileName: string) {
  const url = URL.createObjectURL(new Blob([figureText(svg)], { type: 'image/svg+xml' }));
  const link = document.createElement('a');
  link.href = url;
  link.download = fileName;
  link.click();
  URL.revokeObjectURL(url);
}
