/** The live page document, shared by the server and the browser. Code outside `realtime/` reads and edits pages through this. */

// The page, read
export { readPage, toPageDocument } from "./readPage";
export { blocksOfDocument } from "./pageBlock";
export type { Binned, PageBlock, PageReading } from "./pageBlock";

// The page, made
export { encodeNewPage, fillPage } from "./fillPage";

// The page, edited
export { createEdits } from "./edits";
export type { PageEdits } from "./edits";
export { EditError } from "./editing";
export { isSame } from "./entryEdits";
export type { EntryEdits, KeyedEntry } from "./entryEdits";
export { createUndo } from "./undo";
export { emptyDoc, holdsPage, LOCAL, SHAPE_VERSION } from "./shape";
export type { ListName } from "./shape";

// The page, checked: what the server asks of every edit
export { shapeFault } from "./checkShape";
export { headingOf, touchesHeading } from "./outline";
export type { Heading, OutlineLine } from "./outline";
export { foreignEntries, recordOf } from "./record";
export type { ForeignEntry, RecordLine } from "./record";
