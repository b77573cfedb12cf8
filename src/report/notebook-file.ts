/** The notebook format (nbformat 4) as far as we read and write it, and parameters put into it. */

export interface NotebookOutput {
  readonly output_type: 'stream' | 'display_data' | 'execute_result' | 'error';
  readonly name?: 'stdout' | 'stderr';
  readonly text?: string | readonly string[];
  readonly data?: Readonly<Record<string, unknown>>;
}

export interface NotebookCell {
  readonly cell_type: 'markdown' | 'code' | 'raw';
  readonly id?: string;
  readonly source: string | readonly string[];
  readonly metadata: { readonly tags?: readonly string[] };
  readonly outputs?: readonly NotebookOutput[];
  readonly execution_count?: number | null;
}

export interface Notebook {
  readonly cells: readonly NotebookCell[];
  readonly metadata: object;
  readonly nbformat: number;
  readonly nbformat_minor: number;
}

/** Text that may be stored in lines. */
export function joined(text: string | readonly string[] | undefined): string {
  return typeof text === 'string' ? text : (text ?? []).join('');
}

export function hasTag(cell: NotebookCell, tag: string): boolean {
  return cell.metadata.tags?.includes(tag) ?? false;
}

/**
 * A copy of `notebook` with a cell that declares `parameters` anew after the one tagged `parameters`. Values are
 * written as JSON. Throws when no cell has that tag.
 */
export function withParameters(notebook: Notebook, parameters: Readonly<Record<string, unknown>>): Notebook {
  const place = notebook.cells.findIndex((cell) => hasTag(cell, 'parameters'));
  if (place < 0) throw new Error('The notebook has no cell tagged "parameters".');
  const lines = Object.entries(parameters).map(
    ([name, value]) => `const ${name} = ${JSON.stringify(value)} as const;`,
  );
  const injected: NotebookCell = {
    cell_type: 'code',
    id: 'injected-parameters',
    source: lines.join('\n'),
    metadata: { tags: ['injected-parameters'] },
    outputs: [],
    execution_count: null,
  };
  const cells = [...notebook.cells.slice(0, place + 1), injected, ...notebook.cells.slice(place + 1)];
  return { ...notebook, cells };
}
