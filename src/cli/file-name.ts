/** Names of results. */

/** A text made fit to be the name of a file; '' when nothing is left of it. */
export function fileName(text: string): string {
  return text.replace(/[^\p{L}\p{N}._-]+/gu, '-').replace(/^[.-]+/, '');
}
