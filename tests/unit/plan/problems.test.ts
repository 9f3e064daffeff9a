import { describe, expect, it } from 'vitest';

import { compilePlan } from '#lib/plan/compile.ts';
import { BASE, FRONT } from './plan-text.ts';

/** What an author writes on line 12, and everything that is said about it: place, rule, sentence and cure in full. */
const CASES: readonly (readonly [string, readonly string[]])[] = [
  ['{widht}', ['12:2 unknown-name: Nothing in this plan is called “widht”. Did you mean width?']],
  [
    '{min}',
    ['12:2 function-without-values: “min” is a function and needs values in brackets. Write min(a, b).'],
  ],
  ['{ply}', ['12:2 needs-member: “ply” is a material, not a value. Write ply.thickness.']],
  ['{width.length}', ['12:2 no-members: “width” is a size and has no members. Write width alone.']],
  [
    '{ply.depth}',
    ['12:2 unknown-member: A material has no “depth”. Write ply.thickness, ply.width, ply.length.'],
  ],
  [
    '{ply.width}',
    [
      '12:2 undeclared-measure: The material “ply” states no width. Add width="…" to <Material name="ply" …/>.',
    ],
  ],
  [
    '{A["length"]}',
    [
      '12:2 not-in-the-language: Square brackets behind a name have no place in a plan. Write a plain point: ply.thickness.',
    ],
  ],
  [
    '{(1+2).x}',
    [
      '12:2 not-in-the-language: “1+2” has no members. Only a material and a part have members: ply.thickness, A.length.',
    ],
  ],
  [
    '{width + 3}',
    ['12:2 kinds-differ: A length + a number has no meaning. Give the number a unit: 3*mm or 1/8*inch.'],
  ],
  ['{bays * leg}', ['12:2 kinds-differ: A number * text has no meaning. Bring both sides to one kind.']],
  [
    '{width * width * width * width}',
    ['12:2 kinds-differ: A volume * a length has no meaning. Bring both sides to one kind.'],
  ],
  [
    '{width === bays}',
    ['12:2 kinds-differ: A length === a number has no meaning. Give the number a unit: 3*mm or 1/8*inch.'],
  ],
  ['{leg === "pegs"}', ['12:2 unknown-option: The choice “leg” has no option “pegs”. Did you mean "peg"?']],
  [
    '{width ? 1 : 2}',
    [
      '12:2 wrong-kind: Before ? stands a length, and yes or no is wanted. Write a comparison: width > 900*mm ? a : b.',
    ],
  ],
  [
    '{bays > 1 ? width : 2}',
    ['12:2 kinds-differ: The two branches are a length and a number. Bring both branches to one kind.'],
  ],
  ['{minn(1, 2)}', ['12:2 unknown-function: There is no function “minn”. Did you mean min(a, b)?']],
  [
    '{sin(1)}',
    ['12:2 wrong-kind: sin was given a number, and an angle (30*deg) is wanted. Write sin(30*deg).'],
  ],
  [
    '{floor(width)}',
    [
      '12:2 wrong-kind: floor was given a length, and a step that is a length is wanted. Write floor(a, 5*mm).',
    ],
  ],
  [
    '{roundDown(width, 5)}',
    [
      '12:2 wrong-kind: roundDown was given a length, a number, and a step that is a length is wanted. Write roundDown(a, 5*mm).',
    ],
  ],
  [
    '{sqrt(width)}',
    ['12:2 wrong-kind: sqrt was given a length, and a number or an area is wanted. Write sqrt(a).'],
  ],
  ['{atan2(1)}', ['12:2 wrong-number-of-values: atan2 takes 2 values, not 1. Write atan2(rise, run).']],
  ['{[1, , 2]}', ['12:2 empty-place: A place in the list is empty. Write [a, b, c].']],
  ['{[1, 2]}', ['12:2 wrong-kind: A list cannot be printed in the text. Print its values one by one.']],
  [
    '{a = 1}',
    [
      '12:2 not-in-the-language: An assignment has no place in a plan. Compare with ===, or declare the value with <Let name="…" value={…} />.',
    ],
  ],
  ['{width == 3*mm}', ['12:2 not-in-the-language: The operator == has no place in a plan. Write ===.']],
  ['{2 ** 3}', ['12:2 not-in-the-language: The operator ** has no place in a plan. Multiply: a * a.']],
  [
    '{null}',
    ['12:2 not-in-the-language: “null” has no place in a plan. Leave the attribute out, or use when={…}.'],
  ],
  ['{-leg}', ['12:2 kinds-differ: - before text has no meaning.']],
  ['{!bays}', ['12:2 kinds-differ: ! before a number has no meaning.']],
  [
    '{~bays}',
    ['12:2 not-in-the-language: “~” has no place in a plan. Use + - * / %, comparisons, && and ||.'],
  ],
  ['{1e400}', ['12:2 not-finite: 1e400 is too large for a number.']],
  ['{"a" + "b"}', ['12:2 kinds-differ: Text + text has no meaning. Bring both sides to one kind.']],
  ['{new Date()}', ['12:2 not-in-the-language: “new” has no place in a plan. Leave it out.']],
  [
    '{{a: 1}}',
    [
      '12:2 not-in-the-language: Braces inside an expression have no place in a plan. Write a list in square brackets: [a, b]; for a brace that is only text write \\{.',
    ],
  ],
  [
    '{(1, 2)}',
    [
      '12:3 not-in-the-language: A comma between two values has no place in a plan. Write a list in square brackets: [a, b].',
    ],
  ],
  [
    '{1 +}',
    [
      '12:5 expression-syntax: The expression cannot be read from here on. Check for a missing operator, bracket, comma or quote; write \\{ for a brace that is only text.',
    ],
  ],
  [
    '{(1}',
    [
      '12:4 expression-syntax: The expression cannot be read from here on. Check for a missing operator, bracket, comma or quote; write \\{ for a brace that is only text.',
    ],
  ],
  [
    '{1)}',
    [
      '12:3 expression-syntax: A bracket is closed here that was not opened. Leave it out, or open it before.',
    ],
  ],
  [
    '{"a}',
    [
      '12:2 unclosed: An expression, a text or a comment is opened here and not closed. Close it with }, a quote or */, or write \\{ for a brace that is only text.',
    ],
  ],
  [
    '{',
    [
      '12:1 unclosed: An expression, a text or a comment is opened here and not closed. Close it with }, a quote or */, or write \\{ for a brace that is only text.',
    ],
  ],
  ['<Sise name="a" />', ['12:1 unknown-component: There is no component <Sise>. Did you mean <Size>?']],
  [
    '<Size name="a" label="A" default="5" min="1 mm" max="9 mm" step="1 mm" />',
    ['12:26 written-value: “5” has no unit. Write default={5} for a number, default="5 mm" for a length.'],
  ],
  [
    '<Size name="a" label="A" default="5 mm" min={1} max="9 mm" step="1 mm" />',
    [
      '12:41 kinds-differ: min is a number, and default is a length. Write default, min, max and step in one kind.',
    ],
  ],
  [
    '<Size name="a" label="A" default="50 mm" min="1 mm" max="9 mm" step="1 mm" />',
    ['12:26 size-limits: default lies outside min and max. Choose a default between them.'],
  ],
  [
    '<Size name="a" label="A" default="5 mm" min="1 mm" max="9 mm" step="0 mm" />',
    ['12:63 size-limits: step must be more than nothing. Write step="5 mm".'],
  ],
  [
    '<Size name="a" label="A" default={2.5} min={1} max={4} step={0.5} />',
    [
      '12:56 size-limits: A size that is a number counts in whole numbers. Write default, min, max and step without decimals.',
    ],
  ],
  [
    '<Size name="a" label="A" default={width} min="1 mm" max="9 mm" step="1 mm" />',
    [
      '12:35 not-fixed: default of <Size> cannot depend on “width”. Write a fixed value, and put the limit into a <Require that={…}>.',
    ],
  ],
  [
    '<Size name="min" label="A" default="5 mm" min="1 mm" max="9 mm" step="1 mm" />',
    ['12:7 bad-name: “min” is a word of the language. Choose another name, such as innerWidth.'],
  ],
  [
    '<Size name="2a" label="A" default="5 mm" min="1 mm" max="9 mm" step="1 mm" />',
    ['12:7 bad-name: “2a” cannot be used as a name. Choose another name, such as innerWidth.'],
  ],
  [
    '<Size name="width" label="A" default="5 mm" min="1 mm" max="9 mm" step="1 mm" />',
    [
      '12:7 repeated-name: “width” is already the name of a size. Give it another name: sizes, choices, values, materials and marks share one set of names.',
    ],
  ],
  [
    '<Size name="a" label="A" default="4,5 mm" min="1 mm" max="9 mm" step="1 mm" />',
    [
      '12:26 written-value: A comma is not read, because it means thousands to some and decimals to others. Write a decimal point, 4.5 mm, or leave the comma out, 45 mm.',
    ],
  ],
  [
    '<Let name="b" value="3" />',
    ['12:15 wrong-kind: value of <Let> is text, and an expression is wanted. Write value={width - 36*mm}.'],
  ],
  [
    '<Let name="b" />',
    ['12:1 attribute-missing: <Let> lacks “value”: the formula. Add value={width - 36*mm}.'],
  ],
  [
    '<Let value={3} name="b" nmae="c" />',
    ['12:25 unknown-attribute: <Let> has no attribute “nmae”. Did you mean name?'],
  ],
  [
    '<Let name="b" name="c" value={1} />',
    ['12:15 repeated-attribute: <Let> has “name” twice. Leave one out.'],
  ],
  [
    '<Let name="b" value={c} /><Let name="c" value={b} />',
    ['12:15 cycle: “b” needs itself: b → c → b. Work one of them out from sizes alone.'],
  ],
  [
    '<Choice name="c" label="C" default="a" />',
    ['12:1 no-options: A choice needs options. Put <Option value="…" label="…" /> inside it.'],
  ],
  [
    '<Choice name="c" label="C" default="aa"><Option value="ab" label="x" /></Choice>',
    ['12:28 unknown-option: default is none of the options. Write it exactly as in one of the options.'],
  ],
  [
    '<Choice name="c" label="C" default="a"><Option value="a" label="x" /><Option value={1} label="x" /></Choice>',
    ['12:70 kinds-differ: This option is a number, and the first is text. Write all options in one kind.'],
  ],
  [
    '<Choice name="c" label="C" default="a"><Option value="a" label="x" /><Option value="a" label="y" /></Choice>',
    ['12:70 repeated-option: This option has the value of an earlier one. Leave one out.'],
  ],
  [
    '<Choice name="c" label="C" default="a"><Option value="a" label="x" /><Tool name="t" /></Choice>',
    ['12:70 misplaced: <Tool> has no place inside <Choice>. Put it before or after <Choice>.'],
  ],
  [
    '<Material name="mdf" label="M" kind="shet" thickness="18 mm" />',
    ['12:32 unknown-value: kind of <Material> cannot be “shet”. Did you mean kind="sheet"?'],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness={18} />',
    [
      '12:56 wrong-kind: thickness of <Material> is a number, and a length is wanted. Give the number a unit: {18*mm} or {3/4*inch}.',
    ],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness="18" />',
    ['12:45 written-value: “18” has no unit. Write thickness="18 mm" or thickness="18 in".'],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness="18 mm" price="78,00 EUR" />',
    [
      '12:63 written-value: The price cannot be read. Write it as "78.00 EUR", "6.80 EUR/board foot", "900 EUR/m3", "12 EUR/m2" or "4.50 EUR/m".',
    ],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness="18 mm" price="7.123 EUR" />',
    [
      '12:63 written-value: A price in EUR has at most 2 decimals. Write it as "78.00 EUR", "6.80 EUR/board foot", "900 EUR/m3", "12 EUR/m2" or "4.50 EUR/m".',
    ],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness="18 mm" measured="yes" />',
    [
      '12:63 wrong-kind: measured of <Material> stands alone, without a value. Write measured alone, or leave it out.',
    ],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness="18 mm" sizes={2440*mm} />',
    [
      '12:70 wrong-kind: sizes of <Material> is a length, and a list of stock sizes is wanted. Write sizes={[[2440*mm, 1220*mm]]}.',
    ],
  ],
  [
    '<Material name="mdf" label="M" kind="sheet" thickness={width * 2} grain={width} />',
    ['12:67 wrong-kind: grain of <Material> is an expression, and text is wanted. Write grain="length".'],
  ],
  [
    '<Part mark="B" name="x" material="plyy" qty={2} length={width} width={300*mm} />',
    ['12:25 unknown-name: There is no material “plyy” in this plan. Did you mean material="ply"?'],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} />',
    ['12:1 attribute-missing: <Part> lacks “width”, and its material states none. Add width={…}.'],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width*width} width={3} />',
    [
      '12:56 wrong-kind: length of <Part> is an area, and a length is wanted. Write length={18*mm}.',
      '12:76 wrong-kind: width of <Part> is a number, and a length is wanted. Give the number a unit: {18*mm} or {3/4*inch}.',
    ],
  ],
  [
    '<Part mark="B-1" name="x" material="ply" qty={2} length={width} width={300*mm} />',
    ['12:7 bad-name: “B-1” cannot be used as a mark. Write mark="A" or mark="C1".'],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty="2" length={width} width={300*mm} />',
    ['12:40 wrong-kind: qty of <Part> is text, and a number is wanted. Write qty={2}.'],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm} at={[0*mm, 0*mm]} along="x y" />',
    [
      '12:82 wrong-kind: at of <Part> is a list of lengths, and a list of three lengths is wanted. Write at={[0*mm, 0*mm, 0*mm]}.',
    ],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm} at={[0*mm, 0*mm, 0*mm]} />',
    [
      '12:78 attribute-missing: at needs the axes that the part lies along. Add along="x y": the length runs along x, the width along y.',
    ],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm} along="x x" />',
    [
      '12:78 unknown-value: along of <Part> cannot be “x x”. Write along="z y": the length runs along z, the width along y.',
    ],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm} every={[0*mm, 0*mm, 0*mm]} />',
    ['12:78 attribute-missing: every needs a place to start from. Add at={[0*mm, 0*mm, 0*mm]}.'],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={B.width} width={B.length} />',
    [
      '12:56 cycle: “B.length” needs itself: B.length → B.width → B.length. Work one of them out from sizes alone.',
    ],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm}><Groove edge="lft" width={6*mm} depth={6*mm} /></Part>',
    ['12:86 unknown-value: edge of <Groove> cannot be “lft”. Did you mean edge="left"?'],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm}>text</Part>',
    [
      '12:78 misplaced: Text has no place inside <Part>. Only Notch, Cutout, Groove, Rabbet, Hole, Taper, Bevel, RoundOver stand there.',
    ],
  ],
  [
    '<Part mark="B" name="x" material="ply" qty={2} length={width} width={300*mm}><Hole at={[1*mm, 2*mm]} diameter={6*mm} count={3} /></Part>',
    [
      '12:78 attribute-missing: A row of holes needs both count and spacing. Write count={5} spacing={32*mm}.',
    ],
  ],
  [
    '<Groove edge="left" width={6*mm} depth={6*mm} />',
    ['12:1 misplaced: <Groove> has no place by itself. It stands inside <Part>.'],
  ],
  [
    '<Require that={width}>x</Require>',
    [
      '12:16 wrong-kind: that of <Require> is a length, and yes or no is wanted. Write that={width > 900*mm}.',
    ],
  ],
  [
    '<Require that={width > 1*mm} />',
    [
      '12:1 message-missing: <Require> has no sentence for the buyer. Write <Require that={…}>A bay must be at least {180*mm} wide.</Require>.',
    ],
  ],
  [
    '<Hardware name="h" qty={1} link="javascript:alert(1)" />',
    [
      '12:28 unsafe-address: “javascript:alert(1)” is not an address that may stand in a plan. Write link="https://…".',
    ],
  ],
  [
    '<Hardware name="h" qty={1} pack={0} />',
    ['12:28 wrong-kind: A pack holds at least one. Write pack={50}.'],
  ],
  [
    '<Hardware name="h" qty={1} pack={1.5} />',
    ['12:34 wrong-kind: pack of <Hardware> is a number, and a whole number is wanted. Write pack={2}.'],
  ],
  [
    '<Consumable name="v" for="surface" coverage="10 m2" />',
    [
      '12:36 written-value: The coverage cannot be read. Write it as "10 m2/l" for a surface or "35 m/bottle" for a joint.',
    ],
  ],
  [
    '<Consumable name="v" for="surface" coverage="35 m/bottle" />',
    ['12:36 kinds-differ: A surface is covered in square metres, not in metres. Write coverage="10 m2/l".'],
  ],
  [
    '<Shelf part="A" span={width} load="90" />',
    ['12:30 written-value: The mass cannot be read. Write it as "90 kg" or "200 lb".'],
  ],
  [
    '<Step title="s" parts="A Z" />',
    ['12:17 unknown-name: There is no part “Z” in this plan. Declare it with <Part mark="Z" …/>.'],
  ],
  [
    '<Step title="" />',
    ['12:7 text-length: title of <Step> is empty. Write title="…" with 1 to 400 characters.'],
  ],
  [
    '<Figure src="../a.jpg" alt="x" />',
    [
      '12:9 picture-name: “../a.jpg” is not the name of a picture. Upload the picture and write its name: src="bench.jpg".',
    ],
  ],
  [
    '<View from="frnt" />',
    ['12:7 unknown-value: from of <View> cannot be “frnt”. Did you mean from="front"?'],
  ],
  [
    '<Tool name="t">x</Tool>',
    ['12:16 misplaced: Text has no place inside <Tool>. Close it at once: <Tool … />.'],
  ],
  [
    '<Tool {...a} name="t" />',
    [
      '12:7 not-in-the-language: Attributes cannot be spread from a value. Write each attribute: name={value}.',
    ],
  ],
  [
    '<Step title="s"><Step title="t" /></Step>',
    ['12:17 misplaced: <Step> has no place inside <Step>. Put it before or after <Step>.'],
  ],
  [
    '<Tool>',
    [
      '12:1 text-syntax: The component <Tool> is opened and not closed. Close it with </Tool>, or write <Tool … /> when nothing stands in it.',
    ],
  ],
  [
    '</Tool>',
    [
      '12:2 text-syntax: A component is closed here that was not opened. Leave the closing tag out, or open the component before.',
    ],
  ],
  [
    '<!-- x -->',
    [
      '12:2 text-syntax: An HTML comment or instruction has no place in a plan. Write a comment as {/* … */}.',
    ],
  ],
  [
    'a <3',
    [
      '12:4 text-syntax: Behind < a component’s name is expected. Write \\< for a “less than” that is only text, and [text](https://…) for a link.',
    ],
  ],
  [
    '[a][b]\n\n[b]: c',
    [
      '12:1 not-in-the-language: A link defined apart from its text has no place in a plan. Write [text](https://…).',
      '14:1 not-in-the-language: A link defined apart from its text has no place in a plan. Write [text](https://…).',
    ],
  ],
  [
    'note[^1]\n\n[^1]: x',
    [
      '12:5 not-in-the-language: A footnote has no place in a plan. Write the note into the text.',
      '14:1 not-in-the-language: A footnote has no place in a plan. Write the note into the text.',
    ],
  ],
  [
    'import a from "b"',
    [
      '12:1 not-in-the-language: “import” or “export” has no place in a plan. A plan has everything it needs in its own file: leave the line out.',
    ],
  ],
  [
    '![x](http://a/b.png)',
    [
      '12:1 picture-name: “http://a/b.png” is not the name of a picture. Upload the picture and write its name: ![what it shows](bench.jpg).',
    ],
  ],
  [
    '[x](data:text/html,x)',
    [
      '12:1 unsafe-address: “data:text/html,x” is not an address that may stand in a plan. Write [text](https://…).',
    ],
  ],
  ['{/* fine */} {}', []],
  [
    '<Let name="b" value={1} when={width} />',
    ['12:31 wrong-kind: when of <Let> is a length, and yes or no is wanted. Write when={width > 900*mm}.'],
  ],
  ['<Template part="A" scale={0.5} /> <Caution about="dust">x {leg}</Caution>', []],
  [
    '<Part mark="foot" name="x" material="ply" qty={2} length={width} width={300*mm} />',
    ['12:7 bad-name: “foot” cannot be used as a mark. Write mark="A" or mark="C1".'],
  ],
  [
    '<Choice name="mm" label="C" default={1}><Option value={1} label="x" /></Choice>',
    ['12:9 bad-name: “mm” is a unit; only a choice of texts may be called so. Choose another name.'],
  ],
  [
    '<Material name="mm" label="M" kind="sheet" thickness="18 mm" />',
    ['12:11 bad-name: “mm” is a word of the language. Choose another name, such as innerWidth.'],
  ],
  [
    '<></>',
    [
      '12:1 unknown-component: An empty tag has no place in a plan. The components are Size, Choice, Option, Let, Material, Part, Notch, Cutout, Groove, Rabbet, Hole, Taper, Bevel, RoundOver, Hardware, Consumable, Tool, Require, Shelf, Caution, Step, Figure, View, Template, PartsTable, StockLayout, HardwareTable, ShoppingList.',
    ],
  ],
  ['<Size.x />', ['12:1 unknown-component: There is no component <Size.x>. Did you mean <Size>?']],
  [
    '<a:b />',
    [
      '12:1 unknown-component: There is no component <a:b>. The components are Size, Choice, Option, Let, Material, Part, Notch, Cutout, Groove, Rabbet, Hole, Taper, Bevel, RoundOver, Hardware, Consumable, Tool, Require, Shelf, Caution, Step, Figure, View, Template, PartsTable, StockLayout, HardwareTable, ShoppingList.',
    ],
  ],
  [
    '<Let name="b" value={[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]} />',
    [
      '12:86 expression-too-large: The expression is nested more than 64 deep. Give its pieces names with <Let>.',
    ],
  ],
  ['{1/0}', ['12:2 not-finite: 1/0 is not a finite number. Check for a division by zero.']],
];

function saidAbout(text: string): string[] {
  return compilePlan(text).problems.map(
    ({ line, column, rule, message, hint }) =>
      `${line}:${column} ${rule}: ${message}${hint === undefined ? '' : ` ${hint}`}`,
  );
}

describe('what an author is told', () => {
  it.each(CASES)('%s', (text, said) => {
    expect(saidAbout(`${FRONT}${BASE}${text}\n`)).toEqual(said);
  });

  it('tells everything at once, from the top of the file', () => {
    const text = '{widht}\n\n<Tool nmae="x" />\n\n{1 +}\n\n<Let name="b" value={width + 3} />';
    const { plan, problems } = compilePlan(`${FRONT}${BASE}${text}\n`);
    expect(plan).toBeNull();
    expect(problems.map(({ line, column, length, rule }) => [line, column, length, rule])).toEqual([
      [12, 2, 5, 'unknown-name'],
      [14, 1, 5, 'attribute-missing'],
      [14, 7, 8, 'unknown-attribute'],
      [16, 5, 1, 'expression-syntax'],
      [18, 22, 9, 'kinds-differ'],
    ]);
  });

  it('places a problem alike with Windows line ends', () => {
    const text = `${FRONT}${BASE}{widht}\n`.replaceAll('\n', '\r\n');
    expect(compilePlan(text).problems).toMatchObject([
      { line: 12, column: 2, length: 5, rule: 'unknown-name' },
    ]);
  });

  it('says what was found and what was wanted', () => {
    expect(compilePlan(`${FRONT}${BASE}<Require that={width}>x</Require>\n`).problems).toEqual([
      {
        line: 12,
        column: 16,
        length: 5,
        rule: 'wrong-kind',
        severity: 'error',
        message: 'that of <Require> is a length, and yes or no is wanted.',
        found: 'a length',
        wanted: 'yes or no',
        hint: 'Write that={width > 900*mm}.',
      },
    ]);
  });

  it('reports no more than a hundred problems', () => {
    expect(compilePlan(`${FRONT}${'{nothing} '.repeat(500)}\n`).problems).toHaveLength(100);
  });
});

describe('front matter', () => {
  it.each<[string, string[]]>([
    [
      '',
      [
        '1:1 front-matter-missing: The plan has no front matter. Begin the file with a line of three dashes, then title: …, summary: …, skill: …, hours: […], and three dashes again.',
      ],
    ],
    [
      '---\ntitle: T\n---\n',
      [
        '2:1 front-matter-missing: The front matter lacks “summary”. Write summary: A low bench with open bays for boots.',
        '2:1 front-matter-missing: The front matter lacks “skill”. Write skill: 2',
        '2:1 front-matter-missing: The front matter lacks “hours”. Write hours: [7, 12]',
      ],
    ],
    [
      '---\ntitel: T\ntitle: T\nsummary: S\nskill: 9\nhours: [3, 1]\n---\n',
      [
        '2:1 front-matter-unknown: The front matter has no “titel”. Did you mean title?',
        '5:1 front-matter-value: “skill” in the front matter is not what it should be. Write skill: 2',
        '6:1 front-matter-value: “hours” in the front matter is not what it should be. Write hours: [7, 12]',
      ],
    ],
    [
      '---\na: &a [x]\ntitle: *a\n---\n',
      ['2:1 front-matter-syntax: The front matter uses references. Write each value out.'],
    ],
    [
      '---\ntitle: T\ntitle: U\n---\n',
      [
        '3:1 front-matter-syntax: The front matter cannot be read here. Write one name: value on a line; put a value with a colon in it in double quotes.',
      ],
    ],
  ])('%j', (text, said) => {
    expect(saidAbout(text)).toEqual(said);
  });
});
