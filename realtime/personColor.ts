/** Colours of people: interference colours of the page's look, without the two that mean something. */
const colors = ["var(--magenta)", "var(--green)", "var(--blue)"];

/** The same person has the same colour everywhere: the server stamps it on what others see, a page uses it for its own person. */
export function colorOf(userId: string): string {
  let hash = 0;
  for (const letter of userId) hash = (hash * 31 + letter.charCodeAt(0)) >>> 0;
  return colors[hash % colors.length] ?? "var(--blue)";
}
