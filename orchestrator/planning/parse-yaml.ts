import { isAlias, isMap, isScalar, isSeq, LineCounter, type Pair, parseDocument } from "yaml";
import { problemsError, type TextPlace } from "./problem.ts";
import { yamlSyntaxError } from "./yaml-syntax.ts";

/** A plain value read from YAML, with the place of every field. */
export interface YamlText {
  readonly value: unknown;
  /** Place of a field, or of its nearest parent that stands in the text. */
  readonly placeOf: (path: readonly PropertyKey[]) => TextPlace;
}

/** Bounds of a file: characters, nesting, and values after aliases are followed (so that no bomb unfolds). */
export const YAML_LIMITS = { characters: 1 << 20, depth: 32, values: 100_000 } as const;

/** Names that reach an object's prototype; no field is called so. */
const FORBIDDEN_KEYS = new Set(["__proto__", "constructor", "prototype"]);

/**
 * Reads YAML 1.2 with merge keys (JSON is YAML) into plain values. Refuses what is too large or too deep, repeated
 * fields, unknown tags and names that reach a prototype.
 *
 * @throws YAML_SYNTAX with line and column; TOO_LARGE
 */
export function parseYaml(text: string, fileName: string): YamlText {
  const lines = new LineCounter();
  const placeAt = (offset: number): TextPlace => {
    const { line, col } = lines.linePos(offset);
    return { line: Math.max(1, line), column: Math.max(1, col) };
  };
  const refuse = (offset: number, words: string, instead?: string): never => {
    throw problemsError(
      "YAML_SYNTAX",
      fileName,
      [{ place: placeAt(offset), field: "", words, ...(instead && { instead }) }],
      "Mend the file at that place.",
    );
  };
  if (text.length > YAML_LIMITS.characters)
    throw problemsError(
      "TOO_LARGE",
      fileName,
      [
        {
          place: { line: 1, column: 1 },
          field: "",
          words: `${text.length} characters were given; a campaign file may have ${YAML_LIMITS.characters}`,
        },
      ],
      "Let an axis have a range with a count instead of long lists of values.",
    );
  const document = compose(text, lines, refuse);
  // An unknown tag is a mere warning to the library; here it would be a value that nobody understands.
  if (document.errors.length + document.warnings.length > 0)
    throw yamlSyntaxError([...document.errors, ...document.warnings], fileName, placeAt);
  const places = new Map<string, TextPlace>();
  const value = new Converter(places, placeAt, refuse).convert(document.contents, []);
  return { value, placeOf: (path) => nearestPlace(places, path) };
}

function compose(text: string, lines: LineCounter, refuse: (offset: number, words: string) => never) {
  try {
    // Repeated keys are looked for below: the library's own search takes quadratic time.
    return parseDocument(text, {
      lineCounter: lines,
      merge: true,
      uniqueKeys: false,
      prettyErrors: false,
      logLevel: "error",
    });
  } catch (error) {
    if (error instanceof RangeError) return refuse(0, NESTED);
    throw error;
  }
}

const NESTED = `nested too deeply: a campaign file has at most ${YAML_LIMITS.depth} levels`;

const keyOf = (path: readonly PropertyKey[]): string => JSON.stringify(path.map(String));

function nearestPlace(places: ReadonlyMap<string, TextPlace>, path: readonly PropertyKey[]): TextPlace {
  for (let length = path.length; length >= 0; length--) {
    const place = places.get(keyOf(path.slice(0, length)));
    if (place !== undefined) return place;
  }
  return { line: 1, column: 1 };
}

type Path = readonly (string | number)[];

/** Turns nodes into plain values, keeping the place of each. */
class Converter {
  readonly #anchors = new Map<string, unknown>();
  readonly #places: Map<string, TextPlace>;
  readonly #placeAt: (offset: number) => TextPlace;
  readonly #refuse: (offset: number, words: string, instead?: string) => never;
  #values = 0;
  #depth = 0;

  constructor(
    places: Map<string, TextPlace>,
    placeAt: (offset: number) => TextPlace,
    refuse: (offset: number, words: string, instead?: string) => never,
  ) {
    this.#places = places;
    this.#placeAt = placeAt;
    this.#refuse = refuse;
  }

  /** Value of a node; `from` is the place to name where the node is reached through an alias. */
  convert(node: unknown, path: Path, from?: number): unknown {
    const offset = from ?? startOf(node);
    if (++this.#depth > YAML_LIMITS.depth) return this.#refuse(offset, NESTED);
    if (++this.#values > YAML_LIMITS.values)
      return this.#refuse(offset, `more than ${YAML_LIMITS.values} values, aliases followed`);
    this.#note(path, offset);
    const value = this.#content(node, path, offset);
    this.#depth--;
    return value;
  }

  #content(node: unknown, path: Path, offset: number): unknown {
    if (isAlias(node)) return this.convert(this.#target(node.source, offset), path, offset);
    const anchor = (node as { anchor?: string } | null)?.anchor;
    if (anchor !== undefined) this.#anchors.set(anchor, node);
    if (isMap(node)) return this.#map(node.items as Pair[], path);
    if (isSeq(node)) return node.items.map((item, index) => this.convert(item, [...path, index]));
    return isScalar(node) ? this.#scalar(node.value, offset) : null;
  }

  #note(path: Path, offset: number): void {
    const key = keyOf(path);
    if (!this.#places.has(key)) this.#places.set(key, this.#placeAt(offset));
  }

  #target(name: string, offset: number): unknown {
    if (!this.#anchors.has(name))
      return this.#refuse(offset, `*${name} points at nothing: no &${name} stands above it`);
    return this.#anchors.get(name);
  }

  #scalar(value: unknown, offset: number): unknown {
    if (value === null || ["string", "number", "boolean"].includes(typeof value)) return value;
    return this.#refuse(offset, "a value that is no text, number, true or false");
  }

  #map(pairs: readonly Pair[], path: Path): Record<string, unknown> {
    const own = new Map<string, unknown>();
    const merges: [node: unknown, offset: number][] = [];
    for (const pair of pairs) {
      const offset = startOf(pair.key);
      const name = this.#fieldName(pair.key, offset);
      if (name === "<<") {
        merges.push([pair.value, offset]);
        continue;
      }
      if (own.has(name)) this.#refuse(offset, `the field ${name} is given twice in the same block`);
      // The field's own name is the place to point at, also where its value is an alias.
      this.#note([...path, name], offset);
      own.set(
        name,
        this.convert(pair.value, [...path, name], isAlias(pair.value) ? startOf(pair.value) : undefined),
      );
    }
    const merged = merges.flatMap(([node, offset]) => this.#mergeSources(node, path, offset));
    // Own fields win over merged ones, earlier merged blocks over later ones.
    const entries = merged.reverse().flatMap((block) => Object.entries(block));
    return Object.fromEntries([...entries, ...own]);
  }

  #fieldName(key: unknown, offset: number): string {
    const value = isScalar(key) ? key.value : isAlias(key) ? undefined : key;
    if (typeof value !== "string" && typeof value !== "number" && typeof value !== "boolean")
      // The merge key arrives as a symbol that prints as <<.
      return typeof value === "symbol" ? "<<" : this.#refuse(offset, "a field's name has to be plain text");
    const name = String(value);
    if (FORBIDDEN_KEYS.has(name)) this.#refuse(offset, `no field may be called ${name}`);
    return name;
  }

  #mergeSources(node: unknown, path: Path, offset: number): Record<string, unknown>[] {
    const target = isAlias(node) ? this.#target(node.source, offset) : node;
    const sources = isSeq(target) ? target.items : [target];
    return sources.map((source) => {
      const value = this.convert(source, path, offset);
      if (typeof value !== "object" || value === null || Array.isArray(value))
        return this.#refuse(offset, "<< takes an alias of a block, or a list of them");
      return value as Record<string, unknown>;
    });
  }
}

function startOf(node: unknown): number {
  return (node as { range?: readonly number[] } | null)?.range?.[0] ?? 0;
}
