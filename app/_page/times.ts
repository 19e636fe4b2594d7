/** Times are stored in UTC and shown in the reader's own zone. English month names, as all words of the product. */
const months = ["January", "February", "March", "April", "May", "June", "July", "August", "September", "October", "November", "December"];

const two = (n: number): string => String(n).padStart(2, "0");

/** "14:32" */
export function clockTime(date: Date): string {
  return `${two(date.getHours())}:${two(date.getMinutes())}`;
}

/** "21 November 2026"; with `now` in the same year, "21 November". */
export function dayOf(iso: string, now?: Date): string {
  const date = new Date(iso);
  if (Number.isNaN(date.getTime())) return "";
  const day = `${date.getDate()} ${months[date.getMonth()] ?? ""}`;
  return now !== undefined && now.getFullYear() === date.getFullYear() ? day : `${day} ${date.getFullYear()}`;
}

/** The first and last four figures of a hash: "7c1f … e09a". */
export function shortHash(hash: string): string {
  return hash.length <= 16 ? hash : `${hash.slice(0, 4)} ${hash.slice(4, 8)} … ${hash.slice(-4)}`;
}

/** A whole hash in groups of four. */
export function groupedHash(hash: string): string {
  return hash.replace(/(.{4})(?=.)/g, "$1 ");
}

/** "3.8 MB", "48 kB", "312 bytes". */
export function sizeInWords(bytes: number): string {
  if (bytes < 1000) return `${bytes} bytes`;
  if (bytes < 999_500) return `${(bytes / 1000).toFixed(bytes < 9950 ? 1 : 0)} kB`;
  return `${(bytes / 1e6).toFixed(1)} MB`;
}
