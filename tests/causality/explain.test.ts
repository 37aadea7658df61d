import { expect, it } from "vitest";
import { explainStroke } from "../../grammar/causality/explain.ts";
import { caseText, causalityOf } from "./causal-case.ts";

function why(name: string, bond: string): string[] {
  const { causal } = causalityOf(caseText(name));
  const index = causal.graph.bonds.findIndex(({ id }) => id === bond);
  return explainStroke(causal, index).map(({ text }) => text.replaceAll("`", ""));
}

it("leads from what leaves no choice, over each bond, to the one asked about", () => {
  expect(why("gear-with-second-inertia.wright", "slow->J2")).toEqual([
    "I J1 integrates, and so gives the flow of fast->J1",
    "1-junction fast has its flow from fast->J1, and passes it on to fast->gear",
    "TF gear passes the flow of fast->gear on to gear->slow",
    "1-junction slow has its flow from gear->slow, and passes it on to slow->J2",
  ]);
});

it("names what mirrors, what is demanded, what is free, and what no other bond does", () => {
  expect(why("motor.wright", "armature->drive")).toContain(
    "GY drive turns the flow of drive->shaft into the effort of armature->drive",
  );
  expect(why("demanded-on-a-store.wright", "rail->body")).toEqual([
    "the text demands the stroke of rail->body at rail",
  ]);
  expect(why("divider.wright", "loop->R2")).toEqual([
    "MSe supply sets the effort of supply->loop",
    "R R1 gives the effort of loop->R1, as its law is written; nothing forces it",
    "no other bond of 1-junction loop brings its flow, so loop->R2 must",
  ]);
  expect(why("stubborn-resistor.wright", "loop->z_diode")).toEqual([
    "the law of R z_diode cannot be turned round, so it gives the flow of loop->z_diode",
  ]);
  expect(why("heat-bond.wright", "brake->lining")).toEqual([
    "RS brake gives the flow of its heat bond brake->lining",
  ]);
  expect(why("open-ports.wright", "top->line").at(-1)).toContain("top->line");
  expect(why("gyrator-ring-on-a-store.wright", "j->x").at(-1)).toContain("I x cannot integrate");
});

it("is no slower than the chain is long, and does not recurse", () => {
  const length = 3_000;
  const cells = Array.from(
    { length },
    (_, i) => `TF t${i} out.f = 2*in.f\n0 j${i} : electrical\nj${i} -> t${i} -> j${i + 1}`,
  );
  const text = `notation 1\nsystem S {\nSe s e = 1 V\ns -> j0\n${cells.join("\n")}\n0 j${length} : electrical\nR r e = 1 ohm * f\nj${length} -> r\n}\n`;
  const { causal, findings } = causalityOf(text);
  expect(findings).toEqual([]);
  expect(explainStroke(causal, causal.graph.bonds.length - 1)).toHaveLength(2 * length + 2);
}, 60_000);
