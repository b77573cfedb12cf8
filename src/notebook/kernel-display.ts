/** Sends HTML to the running kernel. The kernel's own package is loaded here and nowhere else, when first needed. */
import { sep } from 'node:path';
import { WrongUse } from '../errors';

/**
 * Shows `html` as output of the running cell. Throws {@link WrongUse} outside a TypeScript kernel, where there is
 * no cell to show it in.
 */
export async function showHtml(html: string): Promise<void> {
  const display = await runningDisplay();
  if (!display) {
    throw new WrongUse(
      'There is no notebook to show this in: the show... functions work in a cell of the TypeScript kernel (tslab). ' +
        'Elsewhere use answerText, or assessLoop and its plain result.',
    );
  }
  display.html(html);
}

/** The display of that copy of tslab which runs the kernel: more than one may be installed. */
async function runningDisplay(): Promise<{ html(text: string): void } | null> {
  const tail = ['tslab', 'dist', 'jupyter.js'].join(sep);
  for (const [path, module] of Object.entries(require.cache)) {
    if (path.endsWith(tail) && module?.exports.lastWriteDisplayData) {
      const copy = await import(path.replace(/jupyter\.js$/, 'public.js'));
      return copy.display;
    }
  }
  return null;
}
