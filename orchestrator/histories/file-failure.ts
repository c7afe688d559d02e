import { AppError, type ErrorCode } from "../contract/index.ts";

const KNOWN: Readonly<Record<string, readonly [code: ErrorCode, what: string, fix: string]>> = {
  ENOENT: ["FILE_NOT_FOUND", "there is no such file", "Check the spelling and the folder you are in."],
  ENOTDIR: ["FILE_NOT_FOUND", "part of the path is a file, not a folder", "Check the path."],
  EISDIR: [
    "FILE_UNREADABLE",
    "this is a folder, not a file",
    "Name the files in it; a pattern such as runs/*.csv names them all.",
  ],
  EACCES: ["FILE_UNREADABLE", "you are not allowed to read it", "Change its permissions, or copy it."],
  EPERM: ["FILE_UNREADABLE", "you are not allowed to read it", "Change its permissions, or copy it."],
  ENAMETOOLONG: ["FILE_NOT_FOUND", "the name is too long for a file", "Check the path."],
  EMFILE: [
    "UNAVAILABLE",
    "too many files are open",
    "Close other programs, or raise the limit with ulimit -n.",
  ],
  Z_DATA_ERROR: [
    "FILE_UNREADABLE",
    "it begins as gzip, but its content is damaged",
    "Pack or copy the file again.",
  ],
  Z_BUF_ERROR: [
    "FILE_UNREADABLE",
    "it begins as gzip, but its end is missing",
    "Copy the file again, whole.",
  ],
};

/** Says in our words why a file could not be read; what we don't know keeps the system's words. */
export function fileFailure(error: unknown, shown: string): AppError {
  const code = typeof error === "object" && error !== null && "code" in error ? String(error.code) : "";
  const known = KNOWN[code];
  if (known !== undefined)
    return new AppError(known[0], `cannot read ${shown}: ${known[1]}`, {
      where: shown,
      fix: known[2],
      cause: error,
    });
  const words = error instanceof Error ? error.message : String(error);
  return new AppError("FILE_UNREADABLE", `cannot read ${shown}: ${words}`, {
    where: shown,
    fix: "Check that the file is whole and on a disk that answers.",
    cause: error,
  });
}
