interface Input {
  readonly isTTY?: boolean;
  setRawMode?(raw: boolean): unknown;
  on(event: 'data', listener: (data: Buffer) => void): unknown;
  removeListener(event: 'data', listener: (data: Buffer) => void): unknown;
  resume(): unknown;
  pause(): unknown;
}

/** Asks on a terminal without showing what is typed. Null where it was given up. */
export function askHidden(
  question: string,
  input: Input = process.stdin,
  show: (text: string) => void = (text) => void process.stderr.write(text),
): Promise<string | null> {
  return new Promise((resolve) => {
    let typed: string[] = [];
    const decoder = new TextDecoder();
    const end = (answer: string | null): void => {
      input.removeListener('data', take);
      input.setRawMode?.(false);
      input.pause();
      show('\n');
      resolve(answer);
    };
    const take = (data: Buffer): void => {
      for (const character of decoder.decode(data, { stream: true })) {
        if (character === '\r' || character === '\n') return end(typed.join(''));
        if (character === '\u0003' || character === '\u0004') return end(null);
        if (character === '\u007f' || character === '\b') typed.pop();
        else if (character === '\u0015') typed = [];
        else if (character >= ' ') typed.push(character);
      }
    };
    show(question);
    input.setRawMode?.(true);
    input.on('data', take);
    input.resume();
  });
}
