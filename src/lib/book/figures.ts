import { cleanText } from './clean-text.ts';
import { needRoom, setParagraph, skip, SMALL, words, type Flow } from './flow.ts';
import { breakLines } from './inline.ts';
import { PENCIL } from './sheet.ts';

const MAX_HEIGHT = 250;
/** How far a picture may shrink to stay on its page. */
const LEAST_SHARE = 0.6;

/** Sets a picture with its caption under it, kept together. One that cannot be set is stood in for by its description. */
export function setFigure(flow: Flow, src: string, alt: string, caption?: string): void {
  const { sheet, faces } = flow;
  const image = flow.images.get(src);
  const width = sheet.right - sheet.text;
  const inlines = [words(cleanText(caption ?? ''), { face: 'italic', size: SMALL.size, color: PENCIL })];
  const lines = caption ? breakLines(inlines, width, faces.measure).length : 0;
  if (!image) {
    const described = [words(cleanText(`Picture: ${alt}`), { size: SMALL.size, color: PENCIL })];
    const count = breakLines(described, width - 16, faces.measure).length;
    const height = count * SMALL.leading + 14;
    needRoom(flow, height + 8);
    flow.pen.box(sheet.text, flow.y, width, height, 0.5, PENCIL);
    flow.y += 7;
    setParagraph(flow, described, SMALL, { x: sheet.text + 8, right: sheet.right - 8 });
    flow.y += 7;
    skip(flow, 8);
    return;
  }
  skip(flow, 3);
  const fullScale = Math.min(width / image.width, MAX_HEIGHT / image.height);
  const room = sheet.bottom - flow.y - lines * SMALL.leading - 14;
  // A little smaller beside its words is better than full size overleaf.
  const fits = room / image.height;
  const scale = fits < fullScale && fits >= fullScale * LEAST_SHARE ? fits : fullScale;
  const [drawnWidth, drawnHeight] = [image.width * scale, image.height * scale];
  needRoom(flow, drawnHeight + lines * SMALL.leading + 14);
  flow.pen.picture(image, sheet.text, flow.y, drawnWidth, drawnHeight);
  flow.y += drawnHeight + 4;
  if (caption) setParagraph(flow, inlines, SMALL);
  skip(flow, 8);
}
