export { groupBodies } from "./bodies";
export { accounts, groups, invitations, memberships, rateLimits, roleEnum, sessions, users, verificationTokens } from "./people";
export { amendmentLog, bytea, contents, pageClients, pages, pageStates, pageUpdates, sources, type OutlineBlock } from "./pages";
export { readingLinks, readingSessions, snapshotFiles, snapshots } from "./snapshots";
