// The few globals that every place the engine runs in has (Node, Electron, browsers, workers) and
// that give the same result in each. Everything else of those places stays unknown here.

declare class TextEncoder {
  encode(text: string): Uint8Array<ArrayBuffer>;
}

declare class TextDecoder {
  constructor(label?: 'utf-8', options?: { fatal?: boolean; ignoreBOM?: boolean });
  decode(bytes: Uint8Array): string;
}
