/** The text that a new plan starts from: small, whole, and it resolves. */
export function starterSource(title: string): string {
  // A title goes into YAML as JSON text, which YAML reads the same.
  return `---
title: ${JSON.stringify(title)}
summary: One sentence that says what it is and where it fits.
skill: 2
hours: [4, 8]
spaces: [hall]
tools: [handsaw, drill]
tags: []
---

Say why you built it, and for which room.

<Size name="width" label="Overall width" default="800 mm" min="400 mm" max="1200 mm" step="5 mm" />

<Material name="ply" label="Plywood" kind="sheet" thickness="18 mm" measured sizes={[[2440*mm, 1220*mm]]} grain="length" species="birch plywood" price="78.00 EUR" />

<Part mark="A" name="Shelf" material="ply" qty={1} length={width} width={250*mm} along="x y" at={[0*mm, 0*mm, 0*mm]} />

<Caution about="dust" />

<Step title="Cut the shelf" parts="A" tools="handsaw" minutes={20}>
Cut one piece {A.length} long and {A.width} wide.
</Step>
`;
}
