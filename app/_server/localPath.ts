/** A path on this server to go to after signing in; `/` for anything that could lead elsewhere. */
export function localPath(path: string | string[] | undefined): string {
  return typeof path === "string" && /^\/(?![/\\])/.test(path) ? path : "/";
}
