/**
 * Paints a drawing of ours (paths, rectangles and texts, with attributes for everything; see
 * main/reports) onto a canvas and gives the picture as PNG. The page's policy loads no picture that
 * is not its own, so the drawing cannot go through an image element.
 */
export async function svgToPng(svg: string, scale = 2): Promise<Uint8Array> {
  const size = /<svg [^>]*width="(\d+)" height="(\d+)"/u.exec(svg);
  if (size === null) throw new Error('svgToPng: the drawing has no size');
  const canvas = document.createElement('canvas');
  canvas.width = Number(size[1]) * scale;
  canvas.height = Number(size[2]) * scale;
  const context = canvas.getContext('2d');
  if (context === null) throw new Error('svgToPng: there is no canvas');
  context.scale(scale, scale);
  for (const shape of shapesOf(svg)) paint(context, shape);
  const blob = await new Promise<Blob | null>((resolve) => canvas.toBlob(resolve, 'image/png'));
  if (blob === null) throw new Error('svgToPng: the picture could not be made');
  return new Uint8Array(await blob.arrayBuffer());
}

export interface Shape {
  readonly name: string;
  readonly attributes: Readonly<Record<string, string>>;
  readonly text: string;
}

export function shapesOf(svg: string): Shape[] {
  return [...svg.matchAll(/<(path|rect|text) ([^>]*?)(?:\/>|>([^<]*)<\/text>)/gu)].map(
    ([, name = '', attributes = '', text = '']) => ({
      name,
      attributes: Object.fromEntries(
        [...attributes.matchAll(/([\w-]+)="([^"]*)"/gu)].map(([, key, value]) => [key, value]),
      ),
      text: plain(text),
    }),
  );
}

function paint(context: CanvasRenderingContext2D, { name, attributes, text }: Shape): void {
  const number = (key: string): number => Number(attributes[key]);
  context.fillStyle = attributes['fill'] ?? '#000';
  if (name === 'path') context.fill(new Path2D(attributes['d']));
  else if (name === 'rect') {
    context.fillRect(number('x'), number('y'), number('width'), number('height'));
  } else {
    context.font = `${attributes['font-size']}px ${plain(attributes['font-family'] ?? '')}`;
    context.textAlign = attributes['text-anchor'] === 'end' ? 'right' : 'left';
    context.fillText(text, number('x'), number('y'));
  }
}

function plain(text: string): string {
  return text
    .replaceAll('&quot;', '"')
    .replaceAll('&gt;', '>')
    .replaceAll('&lt;', '<')
    .replaceAll('&amp;', '&');
}
