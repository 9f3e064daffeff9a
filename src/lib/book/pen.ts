import { PDFHexString, PDFName, PDFOperator, PDFString, PDFOperatorNames as Op } from 'pdf-lib';
import type { PDFFont, PDFImage, PDFRef, PDFPage } from 'pdf-lib';

import type { FaceName, Faces } from './faces.ts';
import { INK } from './sheet.ts';

/** How a text looks. Sizes in points, colours as #RRGGBB. */
export interface TextStyle {
  face: FaceName;
  size: number;
  color?: string;
}

/** Draws on one page, in points with y from the top edge down. Text stands on its baseline. */
export interface Pen {
  page: PDFPage;
  text(text: string, x: number, baseline: number, style: TextStyle): void;
  /** Text that ends at `right`. */
  textTo(text: string, right: number, baseline: number, style: TextStyle): void;
  line(x1: number, y1: number, x2: number, y2: number, width?: number, color?: string): void;
  box(x: number, y: number, width: number, height: number, lineWidth?: number, color?: string): void;
  fill(x: number, y: number, width: number, height: number, color: string): void;
  circle(x: number, y: number, radius: number, lineWidth?: number, color?: string): void;
  picture(image: PDFImage, x: number, y: number, width: number, height: number): void;
  /** Everything drawn inside reads as `text` when it is copied or read aloud. */
  readAs(text: string, draw: () => void): void;
  link(href: string, x: number, y: number, width: number, height: number): void;
  measure: Faces['measure'];
}

const round = (value: number) => String(Math.round(value * 1000) / 1000);
const KAPPA = 0.5523;

function operator(name: Op, ...values: (number | string | PDFName | PDFHexString)[]): PDFOperator {
  return PDFOperator.of(
    name,
    values.map((value) => (typeof value === 'number' ? round(value) : value)),
  );
}

function colorOf(color: string): [number, number, number] {
  const at = (index: number) => parseInt(color.slice(index, index + 2), 16) / 255;
  return [at(1), at(3), at(5)];
}

/**
 * A pen for a page. Each font gets one key in the page's resources, and operators are written straight to the content
 * stream: the page's own text calls would add a key for every call.
 */
export function createPen(page: PDFPage, faces: Faces): Pen {
  const height = page.getHeight();
  const keys = new Map<PDFFont, PDFName>();
  const keyOf = (font: PDFFont): PDFName => {
    const known = keys.get(font);
    if (known) return known;
    const key = page.node.newFontDictionary('F', font.ref);
    keys.set(font, key);
    return key;
  };
  const push = (...operators: PDFOperator[]): void => page.pushOperators(...operators);
  const strokeIn = (color: string) => operator(Op.StrokingColorRgb, ...colorOf(color));
  const fillIn = (color: string) => operator(Op.NonStrokingColorRgb, ...colorOf(color));

  const text: Pen['text'] = (words, x, baseline, { face, size, color = INK }) => {
    const runs = faces.split(face, words);
    if (runs.length === 0) return;
    push(operator(Op.BeginText), fillIn(color), operator(Op.SetTextMatrix, 1, 0, 0, 1, x, height - baseline));
    for (const run of runs)
      push(
        operator(Op.SetFontAndSize, keyOf(run.font), size),
        operator(Op.ShowText, run.font.encodeText(run.text)),
      );
    push(operator(Op.EndText));
  };

  return {
    page,
    measure: faces.measure,
    text,
    textTo: (words, right, baseline, style) =>
      text(words, right - faces.measure(style.face, words, style.size), baseline, style),
    line: (x1, y1, x2, y2, width = 0.5, color = INK) =>
      push(
        strokeIn(color),
        operator(Op.SetLineWidth, width),
        operator(Op.MoveTo, x1, height - y1),
        operator(Op.LineTo, x2, height - y2),
        operator(Op.StrokePath),
      ),
    box: (x, y, width, boxHeight, lineWidth = 0.5, color = INK) =>
      push(
        strokeIn(color),
        operator(Op.SetLineWidth, lineWidth),
        operator(Op.AppendRectangle, x, height - y - boxHeight, width, boxHeight),
        operator(Op.StrokePath),
      ),
    fill: (x, y, width, boxHeight, color) =>
      push(
        fillIn(color),
        operator(Op.AppendRectangle, x, height - y - boxHeight, width, boxHeight),
        operator(Op.FillNonZero),
      ),
    circle: (x, top, radius, lineWidth = 0.6, color = INK) => {
      const y = height - top;
      const k = radius * KAPPA;
      push(
        strokeIn(color),
        operator(Op.SetLineWidth, lineWidth),
        operator(Op.MoveTo, x + radius, y),
        operator(Op.AppendBezierCurve, x + radius, y + k, x + k, y + radius, x, y + radius),
        operator(Op.AppendBezierCurve, x - k, y + radius, x - radius, y + k, x - radius, y),
        operator(Op.AppendBezierCurve, x - radius, y - k, x - k, y - radius, x, y - radius),
        operator(Op.AppendBezierCurve, x + k, y - radius, x + radius, y - k, x + radius, y),
        operator(Op.CloseAndStroke),
      );
    },
    picture: (image, x, y, width, imageHeight) => {
      const key = page.node.newXObject('P', image.ref);
      push(
        operator(Op.PushGraphicsState),
        operator(Op.ConcatTransformationMatrix, width, 0, 0, imageHeight, x, height - y - imageHeight),
        operator(Op.DrawObject, key),
        operator(Op.PopGraphicsState),
      );
    },
    readAs: (words, draw) => {
      push(
        operator(
          Op.BeginMarkedContentSequence,
          PDFName.of('Span'),
          `<</ActualText ${PDFHexString.fromText(words).toString()}>>`,
        ),
      );
      draw();
      push(operator(Op.EndMarkedContent));
    },
    link: (href, x, y, width, boxHeight) => {
      const { context } = page.doc;
      const annotation: PDFRef = context.register(
        context.obj({
          Type: 'Annot',
          Subtype: 'Link',
          Rect: [x, height - y - boxHeight, x + width, height - y],
          Border: [0, 0, 0],
          F: 4,
          A: { Type: 'Action', S: 'URI', URI: PDFString.of(asciiHref(href)) },
        }),
      );
      page.node.addAnnot(annotation);
    },
  };
}

/** Addresses go into the file as ASCII without brackets; one that is escaped already must not be escaped twice. */
function asciiHref(href: string): string {
  let plain = href.toWellFormed();
  try {
    plain = decodeURI(plain);
  } catch {
    // A stray percent sign: escaped as it stands.
  }
  return encodeURI(plain).replace(/[()\\]/g, (char) => `%${char.charCodeAt(0).toString(16)}`);
}
