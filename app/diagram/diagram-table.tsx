import type { DiagramBond, DiagramModel, DiagramNode } from "../../grammar/writing/diagram-model.ts";
import { word } from "../../grammar/writing/drawing-symbols.ts";
import type { Part } from "./nearest.ts";

interface DiagramTableProps {
  readonly model: DiagramModel;
  readonly isLit: (part: Part) => boolean;
  readonly onPoint: (part: Part | null) => void;
  readonly openPart: (part: Part) => void;
}

/** The same as the drawing, in words: a row for each element and one for each bond. */
export function DiagramTable({ model, isLit, onPoint, openPart }: DiagramTableProps) {
  const lights = (part: Part) => ({
    "data-lit": isLit(part),
    onPointerEnter: () => onPoint(part),
    onPointerLeave: () => onPoint(null),
    onFocus: () => onPoint(part),
    onBlur: () => onPoint(null),
  });
  return (
    <section
      className="diagram-table"
      aria-label={`Elements and bonds of ${model.system}`}
      style={{ overflowX: "auto" }}
    >
      <table className="ruled">
        <caption className="note">Elements of {model.system}</caption>
        <thead>
          <tr>
            <th scope="col">Symbol</th>
            <th scope="col">Name</th>
            <th scope="col">Domain</th>
            <th scope="col">Marked</th>
            <th scope="col">Description</th>
          </tr>
        </thead>
        <tbody>
          {model.nodes.map((node) => (
            <tr key={node.id} {...lights({ kind: "node", id: node.id })}>
              <td>{node.symbol}</td>
              <th scope="row">
                <button
                  type="button"
                  className="word"
                  onClick={() => openPart({ kind: "node", id: node.id })}
                >
                  <code>{node.id}</code>
                </button>
              </th>
              <td>{node.domain ?? domainsOf(node, model.bonds)}</td>
              <td>{word(node) ?? ""}</td>
              <td>{node.description}</td>
            </tr>
          ))}
        </tbody>
      </table>
      <table className="ruled">
        <caption className="note">
          Bonds of {model.system}; power counts positive from the first element to the second
        </caption>
        <thead>
          <tr>
            <th scope="col">Bond</th>
            <th scope="col">Domain</th>
            <th scope="col">Causal stroke</th>
            <th scope="col">Effort set by</th>
            <th scope="col">Flow set by</th>
          </tr>
        </thead>
        <tbody>
          {model.bonds.map((bond) => (
            <tr key={bond.id} {...lights({ kind: "bond", id: bond.id })}>
              <th scope="row">
                <button
                  type="button"
                  className="word"
                  onClick={() => openPart({ kind: "bond", id: bond.id })}
                >
                  <code style={{ whiteSpace: "nowrap" }}>{bond.id}</code>
                </button>
              </th>
              <td>{bond.domain}</td>
              <td>{strokeText(bond)}</td>
              <td>{setBy(bond, "e")}</td>
              <td>{setBy(bond, "f")}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </section>
  );
}

function domainsOf(node: DiagramNode, bonds: readonly DiagramBond[]): string {
  const domains = bonds
    .filter(({ from, to }) => from === node.id || to === node.id)
    .map(({ domain }) => domain);
  return [...new Set(domains)].join(" and ");
}

function strokeText(bond: DiagramBond): string {
  if (bond.stroke === null) return bond.conflict ? "open, in conflict" : "open";
  const demanded = bond.demanded === bond.stroke ? ", demanded in the text" : "";
  return `at ${bond[bond.stroke]}${demanded}${bond.conflict ? ", in conflict" : ""}`;
}

/** The end with the stroke is told the effort by the other end, and tells it the flow. */
function setBy(bond: DiagramBond, variable: "e" | "f"): string {
  if (bond.stroke === null) return "";
  const told = bond.stroke;
  const other = told === "from" ? "to" : "from";
  const unit = variable === "e" ? bond.effortUnit : bond.flowUnit;
  return `${bond[variable === "e" ? other : told]} (${unit})`;
}
