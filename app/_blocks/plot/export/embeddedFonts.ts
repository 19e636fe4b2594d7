const FAMILY = "IBM Plex Sans";

/** Whether a rule's unicode-range has any of the characters; a rule without one has all. */
export function coversAny(range: string, characters: ReadonlySet<number>): boolean {
  if (range.trim() === "") return true;
  const parts = range.split(",").map((part) => {
    const [from = "0", to = from] = part.trim().replace(/^U\+/iu, "").split("-");
    return [Number.parseInt(from.replaceAll("?", "0"), 16), Number.parseInt(to.replaceAll("?", "F"), 16)] as const;
  });
  for (const character of characters) if (parts.some(([from, to]) => character >= from && character <= to)) return true;
  return false;
}

/** What of the type a drawing uses: its characters, and weights with their slant as `400 normal`. */
export function typeUsed(svg: string): { readonly characters: ReadonlySet<number>; readonly faces: ReadonlySet<string> } {
  const words = [...svg.matchAll(/<text[\s\S]*?<\/text>/gu)].map(([text]) => text);
  const characters = new Set(words.flatMap((text) => Array.from(text.replace(/<[^>]*>/gu, ""), (c) => c.codePointAt(0) ?? 0)));
  const weights = new Set(words.flatMap((text) => [...text.matchAll(/font-weight:\s*(?<weight>\w+)/gu)].map((found) => found.groups?.["weight"] ?? "")));
  const slants = words.some((text) => /font-style:\s*italic/u.test(text)) ? ["normal", "italic"] : ["normal"];
  const named: Readonly<Record<string, string>> = { normal: "400", bold: "700" };
  const faces = [...weights, "400"].flatMap((weight) => slants.map((slant) => `${named[weight] ?? weight} ${slant}`));
  return { characters, faces: new Set(faces) };
}

/**
 * The page's own type as rules of @font-face with the files inside, as far as a drawing uses it, so that the figure reads the
 * same on a machine that has never seen this page.
 */
export async function embeddedFonts(svg: string): Promise<string> {
  const { characters, faces } = typeUsed(svg);
  const rules = [...document.styleSheets].flatMap((sheet) => {
    try {
      return [...sheet.cssRules].map((rule) => ({ rule, base: sheet.href ?? document.baseURI }));
    } catch {
      return [];
    }
  });
  const wanted = rules.flatMap(({ rule, base }) => {
    if (!(rule instanceof CSSFontFaceRule)) return [];
    const get = (name: string): string => rule.style.getPropertyValue(name).trim();
    if (get("font-family").replace(/["']/gu, "") !== FAMILY) return [];
    const face = `${get("font-weight") || "400"} ${get("font-style") || "normal"}`;
    const url = /url\(["']?(?<url>[^"')]+\.woff2[^"')]*)["']?\)/u.exec(get("src"))?.groups?.["url"];
    if (url === undefined || !faces.has(face) || !coversAny(get("unicode-range"), characters)) return [];
    return [{ face, range: get("unicode-range"), url: new URL(url, base).href }];
  });
  const made = await Promise.all(
    wanted.map(async ({ face, range, url }) => {
      const answer = await fetch(url);
      if (!answer.ok) throw new Error(`The type of the figure could not be fetched (${answer.status}). Try again.`);
      const [weight = "400", slant = "normal"] = face.split(" ");
      const where = range === "" ? "" : `unicode-range:${range};`;
      return `@font-face{font-family:"${FAMILY}";font-weight:${weight};font-style:${slant};${where}src:url(data:font/woff2;base64,${base64(await answer.arrayBuffer())}) format("woff2");}`;
    }),
  );
  return made.join("");
}

function base64(buffer: ArrayBuffer): string {
  const bytes = new Uint8Array(buffer);
  let text = "";
  for (let i = 0; i < bytes.length; i += 0x8000) text += String.fromCharCode(...bytes.subarray(i, i + 0x8000));
  return btoa(text);
}
