type AnyTyped = Float64Array | Float32Array | Uint8Array | Uint16Array | Uint32Array | Int32Array;

function isTyped(value: unknown): value is AnyTyped {
  return ArrayBuffer.isView(value) && !(value instanceof DataView);
}

/**
 * A copy of a value whose typed arrays are copies too, and the memory of those, to be handed over in `postMessage`: the engine
 * keeps its own arrays, and the page takes the copies without copying again.
 */
export function copyForTransfer<T>(value: T): { copy: T; transfer: ArrayBuffer[] } {
  const transfer: ArrayBuffer[] = [];
  const walk = (node: unknown): unknown => {
    if (typeof node !== "object" || node === null) return node;
    if (isTyped(node)) {
      const copy = node.slice();
      transfer.push(copy.buffer as ArrayBuffer);
      return copy;
    }
    if (Array.isArray(node)) {
      // A list of plain values is cloned by postMessage itself; only lists of objects can hold arrays.
      return node.some((entry) => typeof entry === "object" && entry !== null) ? node.map(walk) : node;
    }
    if (node instanceof Map) return new Map(Array.from(node, ([key, entry]) => [key, walk(entry)]));
    const copy: Record<string, unknown> = {};
    for (const [key, entry] of Object.entries(node)) copy[key] = walk(entry);
    return copy;
  };
  return { copy: walk(value) as T, transfer };
}
