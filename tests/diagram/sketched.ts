import type { Stroke } from "../../grammar/causality/strokes.ts";
import type { NodeKind } from "../../grammar/resolve/graph.ts";
import type { DiagramBond, DiagramModel, DiagramNode } from "../../grammar/writing/diagram-model.ts";

/**
 * A diagram model from a sketch, a statement a line: `MTF lever`, `1 shaft : rotation`, `C spring dependent`,
 * `supply -> armature |to electrical`, where `|to` or `|from` is the stroke, `||to` a demanded one.
 */
export function sketched(text: string): DiagramModel {
  const nodes: DiagramNode[] = [];
  const bonds: DiagramBond[] = [];
  const statements = text.split("\n").flatMap((line) => (line.trim() === "" ? [] : [line.trim()]));
  for (const [i, statement] of statements.entries()) {
    const span = { file: "sketch.wright", start: 10 * i, end: 10 * i + 9 };
    const bond = /^(\S+) -> (\S+)(?: (\|\|?)(from|to))?(?: (\w+))?( conflict)?$/.exec(statement);
    if (bond !== null) {
      const [, from, to, bars, end, domain = "translation", conflict] = bond;
      const stroke = (end ?? null) as Stroke | null;
      const again = bonds.filter((other) => other.from === from && other.to === to).length;
      bonds.push({
        id: `${from}->${to}${again === 0 ? "" : `#${again + 1}`}`,
        from,
        to,
        stroke,
        demanded: bars === "||" ? stroke : null,
        conflict: conflict !== undefined,
        domain,
        effortUnit: "N",
        flowUnit: "m/s",
        span,
      });
      continue;
    }
    const node = /^(\S+) (\S+?)(?: : (\w+))?( dependent)?( conflict)?$/.exec(statement);
    if (node === null) throw new Error(`not a sketch: ${statement}`);
    const [, symbol, id, domain = null, dependent, conflict] = node;
    nodes.push({
      id,
      kind: symbol.replace(/^M/, "") as NodeKind,
      symbol,
      domain,
      description: null,
      dependent: dependent !== undefined,
      conflict: conflict !== undefined,
      span,
    });
  }
  return { system: "Sketch", nodes, bonds };
}

export const HOIST = `
  Se supply
  R R_a
  I winding
  1 armature : electrical
  GY motor
  1 shaft : rotation
  I rotor
  R bearing
  TF gearbox
  TF drum
  0 rope.line : translation
  1 rope.stretch : translation
  C rope.spring
  R rope.strands
  1 boat : translation
  I hull
  Se weight
  supply -> armature |to electrical
  armature -> R_a |from electrical
  armature -> winding |to electrical
  armature -> motor |from electrical
  motor -> shaft |to rotation
  shaft -> rotor |to rotation
  shaft -> bearing |from rotation
  shaft -> gearbox |from rotation
  gearbox -> drum |from rotation
  drum -> rope.line |from
  rope.line -> rope.stretch |from
  rope.stretch -> rope.spring |from
  rope.stretch -> rope.strands |from
  rope.line -> boat |to
  boat -> hull |to
  weight -> boat |to
`;

export const GEARED = `
  Se torque
  1 motor : rotation
  I J1
  TF gear
  1 load : rotation
  I J2 dependent
  R friction
  torque -> motor |to rotation
  motor -> J1 |to rotation
  motor -> gear |from rotation
  gear -> load |from rotation
  load -> J2 |from rotation
  load -> friction |from rotation
`;

export const BRIDGE = `
  Se battery
  1 source : electrical
  0 top : electrical
  0 bottom : electrical
  1 arm1
  1 arm2
  1 arm3
  1 arm4
  0 left : electrical
  0 right : electrical
  1 middle
  R R1
  R R2
  R R3
  R R4
  R detector
  battery -> source |to electrical
  source -> top |to electrical
  top -> arm1 |to electrical
  top -> arm2 |to electrical
  arm1 -> left |from electrical
  arm2 -> right |from electrical
  left -> arm3 |to electrical
  right -> arm4 |to electrical
  left -> middle |to electrical
  middle -> right |to electrical
  arm3 -> bottom |from electrical
  arm4 -> bottom |from electrical
  bottom -> source |to electrical
  arm1 -> R1 |to electrical
  arm2 -> R2 ||to electrical
  arm3 -> R3 |to electrical
  arm4 -> R4 |to electrical
  middle -> detector |from electrical
`;

export const MARKED = `
  Se push
  Sf pull
  MTF lever
  1 body
  I mass conflict
  C spring dependent
  R a
  R b
  R c
  port outside
  IC solenoid
  0 node
  push -> body ||to
  pull -> body |from
  body -> mass |from conflict
  body -> spring |to
  body -> a
  body -> b
  body -> c
  body -> lever |from
  lever -> node |from
  node -> solenoid |to
  outside -> solenoid
`;

/** `cells` masses with a spring and a damper between neighbours. */
export function massChain(cells: number): string {
  const lines: string[] = [];
  for (let i = 1; i <= cells; i += 1) {
    lines.push(
      `1 cell[${i}]`,
      `I mass[${i}]`,
      `0 line[${i}]`,
      `1 between[${i}]`,
      `C spring[${i}]`,
      `R damper[${i}]`,
    );
    if (i > 1) lines.push(`line[${i - 1}] -> cell[${i}] |to`);
    lines.push(
      `cell[${i}] -> mass[${i}] |to`,
      `cell[${i}] -> line[${i}] |from`,
      `line[${i}] -> between[${i}] |from`,
    );
    lines.push(`between[${i}] -> spring[${i}] |from`, `between[${i}] -> damper[${i}] |from`);
  }
  return lines.join("\n");
}
