import type { AppError } from "../contract/index.ts";
import { problemsError, type TextPlace } from "./problem.ts";

/** A complaint of the YAML parser. */
export interface SyntaxComplaint {
  readonly code: string;
  readonly message: string;
  readonly pos: readonly [number, number];
}

/** One slip makes a parser complain about much that follows; only the first places are worth reading. */
const PLACES_LISTED = 3;

/** Makes one error of the parser's complaints: the first few, each wording once. */
export function yamlSyntaxError(
  complaints: readonly SyntaxComplaint[],
  fileName: string,
  placeAt: (offset: number) => TextPlace,
): AppError {
  const found = new Map<string, { place: TextPlace; field: ""; words: string }>();
  for (const complaint of complaints.toSorted((a, b) => a.pos[0] - b.pos[0])) {
    const words = syntaxWords(complaint);
    if (!found.has(words)) found.set(words, { place: placeAt(complaint.pos[0]), field: "", words });
  }
  const fix =
    'Mend the first place and try again: what follows may come from it. Indent with spaces, and put text that holds ": " or " #" in quotes.';
  return problemsError("YAML_SYNTAX", fileName, [...found.values()].slice(0, PLACES_LISTED), fix);
}

/** The parser's complaint in a user's words, where the parser speaks of its own insides. */
function syntaxWords({ code, message }: SyntaxComplaint): string {
  const [first = message] = message.split("\n");
  if (code === "TAB_AS_INDENT" || /\btabs?\b/i.test(first))
    return "a tab stands where only spaces may indent";
  if (code === "RESOURCE_EXHAUSTION" || first.includes("call stack")) return "nested too deeply";
  if (code === "MULTIPLE_DOCS") return "a second document begins here; a campaign file holds one";
  if (first.includes("in YAML stream")) return "the document has ended above this place";
  if (
    first.startsWith("Nested mappings") ||
    code === "MULTILINE_IMPLICIT_KEY" ||
    code === "BLOCK_AS_IMPLICIT_KEY"
  )
    return "a colon stands where no field can begin";
  if (first.startsWith("Implicit map keys")) return "a field's name without a colon behind it";
  if (first.startsWith("Unresolved tag"))
    return `${first.replace("Unresolved tag: ", "")} is a tag that means nothing here`;
  return `not valid YAML: ${first}`;
}
