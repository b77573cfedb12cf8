/** A copy of a text that was cut from a longer one: the piece alone would keep the whole of it in memory. */
export function ownText(text: string): string {
  return Buffer.from(text).toString();
}
