import type { Uploaded } from "./services";

/** The sentence of a problem document, or one of ours where the server gave none. */
export function problemSentence(status: number, body: unknown): string {
  if (typeof body === "object" && body !== null) {
    const { detail, title } = body as { detail?: unknown; title?: unknown };
    if (typeof detail === "string" && detail !== "") return detail;
    if (typeof title === "string" && title !== "") return title;
  }
  if (status === 413) return "This file is too large: a source holds at most 50 MiB.";
  if (status === 401) return "You are signed out. Sign in again in another tab, then repeat this.";
  if (status === 403) return "You may not change this page. Ask a lead of the group.";
  return `The server answered ${status}. Nothing was kept; try again.`;
}

/**
 * Sends a file to the page's group, where it is kept byte for byte.
 *
 * @throws Error with a sentence for the person, also where it was stopped.
 */
export function uploadSource(pageId: string, bytes: Uint8Array, fileName: string, onProgress: (done: number) => void, signal: AbortSignal): Promise<Uploaded> {
  return new Promise((resolve, reject) => {
    // fetch cannot say how much was sent yet.
    const request = new XMLHttpRequest();
    request.open("POST", `/api/pages/${pageId}/sources`);
    request.setRequestHeader("content-type", "application/octet-stream");
    request.setRequestHeader("x-file-name", encodeURIComponent(fileName));
    request.responseType = "json";
    request.upload.onprogress = (event) => {
      if (event.lengthComputable && event.total > 0) onProgress(event.loaded / event.total);
    };
    request.onload = () => {
      const body: unknown = request.response;
      if (request.status === 201 || request.status === 200) resolve(body as Uploaded);
      else reject(new Error(problemSentence(request.status, body)));
    };
    request.onerror = () => reject(new Error("The server could not be reached. Nothing was kept; try again when you are online."));
    request.onabort = () => reject(new Error("Stopped. Nothing was kept."));
    signal.addEventListener("abort", () => request.abort(), { once: true });
    request.send(bytes.slice().buffer);
  });
}
