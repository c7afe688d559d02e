// The HTTP interface of a data folder, and the other side of it: what can be asked, the Express app that lets others
// ask it, and the client with which a second command asks the process that holds the folder. Nothing here knows how the
// answers are come by. Read answers.ts first, then app.ts.
export type { Answers } from "./answers.ts";
export { createApp } from "./app.ts";
export { folderAnswers } from "./folder-answers.ts";
export { type LiveNight, nextPicture, type WorkerPicture } from "./live-night.ts";
export { answersAt, remoteAnswers } from "./remote-answers.ts";
export { type Serving, serveApp } from "./serve-app.ts";
