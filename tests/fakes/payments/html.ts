/** Text made safe inside elements and quoted attributes. */
export function escapeHtml(value: string): string {
  return value
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;')
    .replaceAll("'", '&#39;');
}

const STYLE = `
:root { color-scheme: light dark; --sheet: #FAFBF8; --ink: #1C2326; --pencil: #566067; --rule: #C9D0CE; --tape: #F5C518; --blue: #0F5C8C; --red: #B3261E; --green: #2E6B3C; }
@media (prefers-color-scheme: dark) { :root { --sheet: #14181A; --ink: #E8ECEA; --pencil: #A3AEB2; --rule: #384246; --tape: #D9AE14; --blue: #6FB7E0; --red: #FF8A7A; --green: #7FC892; } }
* { box-sizing: border-box; }
body { margin: 0; padding: 1.2rem; background: var(--sheet); color: var(--ink); font: 18px/1.5 Georgia, serif; }
main { max-width: 44rem; margin: 0 auto; border: 1px solid var(--ink); padding: 1.4rem; }
.notice { margin: -1.4rem -1.4rem 1.4rem; padding: .5rem 1.4rem; border-bottom: 1px solid var(--ink); border-left: 10px solid var(--tape); font-weight: bold; }
h1 { font-size: 1.44em; margin: 0 0 .6rem; } h2 { font-size: 1.2em; margin: 1.4rem 0 .5rem; border-top: 1px solid var(--rule); padding-top: 1rem; }
table { width: 100%; border-collapse: collapse; } th, td { text-align: left; padding: .35rem 0; border-bottom: 1px solid var(--rule); vertical-align: top; font-weight: normal; }
td:last-child, th:last-child { text-align: right; font-family: ui-monospace, monospace; font-variant-numeric: tabular-nums; white-space: nowrap; padding-left: 1rem; }
.total th, .total td { font-weight: bold; border-bottom: 2px solid var(--ink); }
label { display: block; margin: .8rem 0 .2rem; } .tick { display: flex; gap: .6rem; align-items: center; min-height: 44px; } .tick input { width: 24px; height: 24px; min-height: 0; }
input, select { width: 100%; min-height: 44px; padding: .4rem .6rem; font: inherit; color: inherit; background: transparent; border: 1px solid var(--ink); border-radius: 0; } option { color: #1C2326; background: #FAFBF8; }
.pair { display: grid; grid-template-columns: 1fr 1fr; gap: 0 1rem; } .with { display: grid; grid-template-columns: 1fr auto; gap: .6rem; }
button { min-height: 44px; padding: .4rem 1rem; font: inherit; color: var(--ink); background: transparent; border: 1px solid var(--ink); border-radius: 0; cursor: pointer; }
button.main { color: var(--sheet); background: var(--ink); font-weight: bold; width: 100%; margin-top: 1.2rem; }
a { color: var(--blue); } :focus-visible { outline: 3px solid var(--blue); outline-offset: 2px; }
.fault { border: 1px solid var(--red); border-left-width: 6px; color: var(--red); padding: .5rem .8rem; } .small { color: var(--pencil); font-size: .9em; }
`;

/** One page of the stand-in: a drawing sheet that says at its head that no real money moves. No script, no outside file. */
export function renderSheet(heading: string, body: string): string {
  return `<!doctype html>
<html lang="en">
<head><meta charset="utf-8"><meta name="viewport" content="width=device-width, initial-scale=1"><meta name="robots" content="noindex">
<title>Payment stand-in: no real money moves</title><style>${STYLE}</style></head>
<body><main><p class="notice">Payment stand-in: no real money moves</p>
<h1>${escapeHtml(heading)}</h1>
${body}
</main></body></html>
`;
}
