import { cleanText } from './clean-text.ts';
import { needRoom, PROSE, setParagraph, skip, words, type Flow } from './flow.ts';
import { breakLines } from './inline.ts';
import { RED } from './sheet.ts';

/** The usual caution of the house by topic. Each defers to local rules and to licensed trades where these decide. */
const USUAL: ReadonlyMap<string, { title: string; text: string }> = new Map([
  [
    'dust',
    {
      title: 'Dust',
      text: 'Wood and sheet dust harms the lungs. Extract it at the tool and wear a fitted mask, above all with MDF and hardwoods.',
    },
  ],
  [
    'wall fixing',
    {
      title: 'Fixing to a wall',
      text: 'Find out what the wall is made of and what runs inside it before you drill. Use fixings made for that wall and for the load; where you are unsure, ask a qualified person. Local building rules come first.',
    },
  ],
  [
    'tip-over',
    {
      title: 'Tip-over',
      text: 'Tall or drawered furniture can fall on a person. Fasten it to the wall, and keep heavy things low.',
    },
  ],
  [
    'load',
    {
      title: 'Load',
      text: 'Loads and sags given here are guidance, never an approval. Try the piece with a dead load before you trust a person to it.',
    },
  ],
  [
    'children',
    {
      title: 'Children',
      text: 'Keep cords, small parts, pinch points and lids that can fall or latch away from children. Local product-safety rules apply to whatever is made for them.',
    },
  ],
  [
    'wiring',
    {
      title: 'Wiring',
      text: 'Mains wiring is for a licensed electrician and the local code. Switch off, lock off and prove dead before any work near it.',
    },
  ],
  [
    'finish',
    {
      title: 'Finish',
      text: 'Air the room while finishing. Rags with drying oil can set themselves alight: spread them flat outdoors to dry, or keep them under water in a lidded metal can.',
    },
  ],
  [
    'blade',
    {
      title: 'Blades',
      text: 'Use the guard, the riving knife and push sticks. Unplug before changing a blade or a cutter, and never free-hand a cut that should be guided.',
    },
  ],
]);

/**
 * Sets one caution beside a red rule: its subject, the author's own words, and the usual ones of the house unless these were
 * said before. Kept together.
 */
export function setCaution(flow: Flow, caution: { about: string; text: string }, isRepeated = false): void {
  const usual = USUAL.get(caution.about);
  const title = usual?.title ?? caution.about.charAt(0).toUpperCase() + caution.about.slice(1);
  const body = [caution.text, isRepeated && caution.text !== '' ? '' : (usual?.text ?? '')]
    .filter((text) => text !== '')
    .join(' ');
  const inlines = [words(`${cleanText(title)}. `, { face: 'semibold', color: RED }), words(cleanText(body))];
  const x = flow.sheet.text + 12;
  const lines = breakLines(inlines, flow.sheet.right - x, flow.faces.measure);
  skip(flow, 3);
  needRoom(flow, lines.length * PROSE.leading + 4);
  const top = flow.y;
  const pages = flow.pens.length;
  const { pen } = flow;
  setParagraph(flow, inlines, PROSE, { x });
  const end = flow.pens.length === pages ? flow.y : flow.sheet.bottom;
  pen.line(flow.sheet.text + 2, top + 2, flow.sheet.text + 2, end - 1, 2, RED);
  skip(flow, 8);
}
