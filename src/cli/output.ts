/** Where a command writes: the terminal, or what stands for it in a test. */

export interface Output {
  readonly stdout: { write(text: string): unknown };
  readonly stderr: { write(text: string): unknown; readonly isTTY?: boolean };
}
