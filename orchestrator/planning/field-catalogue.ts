import { z } from "zod";
import type { FieldStep } from "./field-path.ts";

/** The part of JSON Schema that is read here. */
export interface SchemaNode {
  readonly type?: string | readonly string[];
  readonly title?: string;
  readonly description?: string;
  readonly properties?: Readonly<Record<string, SchemaNode>>;
  readonly required?: readonly string[];
  readonly additionalProperties?: boolean | SchemaNode;
  readonly items?: SchemaNode;
  readonly prefixItems?: readonly SchemaNode[];
  readonly anyOf?: readonly SchemaNode[];
  readonly oneOf?: readonly SchemaNode[];
  readonly allOf?: readonly SchemaNode[];
  readonly enum?: readonly unknown[];
  readonly const?: unknown;
  readonly minimum?: number;
  readonly maximum?: number;
  readonly exclusiveMinimum?: number;
  readonly exclusiveMaximum?: number;
  readonly minItems?: number;
  readonly maxItems?: number;
  readonly $ref?: string;
  readonly $defs?: Readonly<Record<string, SchemaNode>>;
}

const DEPTH_MAX = 16;

/** What a schema says about its fields, found by path: the source of every "allowed is" in an error. */
export class FieldCatalogue {
  readonly root: SchemaNode;

  constructor(schema: z.ZodType) {
    this.root = z.toJSONSchema(schema, { io: "input", unrepresentable: "any" }) as SchemaNode;
  }

  /**
   * Every shape that the field at a path may have; none where there is no such field. Where a block comes in kinds, the
   * value given there chooses the kind.
   */
  nodesAt(path: readonly (FieldStep | PropertyKey)[], value?: unknown): SchemaNode[] {
    let nodes = this.#alternatives([this.root], value);
    let current = value;
    for (const step of path) {
      current = childOf(current, step);
      nodes = this.#alternatives(
        nodes.flatMap((node) => stepInto(node, step)),
        current,
      );
    }
    return nodes;
  }

  /** Names of the fields that the block at a path may have. */
  namesAt(path: readonly (FieldStep | PropertyKey)[], value?: unknown): string[] {
    return [...new Set(this.nodesAt(path, value).flatMap((node) => Object.keys(node.properties ?? {})))];
  }

  /** Paths of all single values, lists as `*`: what an axis may move. */
  leafPaths(): string[] {
    const found = new Set<string>();
    const walk = (nodes: SchemaNode[], path: string[]) => {
      if (path.length > DEPTH_MAX) return;
      for (const node of this.#alternatives(nodes, undefined)) {
        const children = Object.entries(node.properties ?? {});
        for (const [key, child] of children) walk([child], [...path, key]);
        if (node.items !== undefined) walk([node.items], [...path, "*"]);
        if (children.length === 0 && node.items === undefined && path.length > 0) found.add(path.join("."));
      }
    };
    walk([this.root], []);
    return [...found];
  }

  #alternatives(nodes: readonly SchemaNode[], value: unknown, depth = 0): SchemaNode[] {
    if (depth > DEPTH_MAX) return [];
    return nodes.flatMap((node) => {
      if (node.$ref !== undefined) return this.#alternatives(this.#referred(node.$ref), value, depth + 1);
      const parts = [...(node.anyOf ?? []), ...(node.oneOf ?? []), ...(node.allOf ?? [])];
      if (parts.length === 0) return [node];
      const inherited = node.description === undefined ? {} : { description: node.description };
      const all = this.#alternatives(parts, value, depth + 1).map((part) => ({ ...inherited, ...part }));
      const ofKind = all.filter((part) => constantsAgree(part, value));
      return ofKind.length > 0 ? ofKind : all;
    });
  }

  #referred(reference: string): SchemaNode[] {
    const found = this.root.$defs?.[reference.replace("#/$defs/", "")];
    return found === undefined ? (reference === "#" ? [this.root] : []) : [found];
  }
}

function stepInto(node: SchemaNode, step: FieldStep | PropertyKey): SchemaNode[] {
  if (step === "*" || typeof step === "number") {
    const fixed = typeof step === "number" ? node.prefixItems?.[step] : undefined;
    if (fixed !== undefined) return [fixed];
    return node.items === undefined ? [] : [node.items];
  }
  const own = Object.entries(node.properties ?? {}).find(([key]) => key === step)?.[1];
  if (own !== undefined) return [own];
  return typeof node.additionalProperties === "object" ? [node.additionalProperties] : [];
}

function childOf(value: unknown, step: FieldStep | PropertyKey): unknown {
  if (typeof value !== "object" || value === null || typeof step === "symbol") return undefined;
  return Object.hasOwn(value, step) ? (value as Record<string | number, unknown>)[step] : undefined;
}

/** Whether a block has the constants (its kind) that this shape asks for. */
function constantsAgree(node: SchemaNode, value: unknown): boolean {
  const constants = Object.entries(node.properties ?? {}).filter(([, child]) => child.const !== undefined);
  return constants.length > 0 && constants.every(([key, child]) => childOf(value, key) === child.const);
}
