import { readFileSync, writeFileSync } from 'node:fs';

export interface Rectangle {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

/** Where the window stood: in device-independent pixels of all displays together. */
export interface WindowState {
  readonly bounds: Rectangle;
  readonly maximized: boolean;
}

const usual = { width: 1280, height: 800 };
export const smallest = { width: 720, height: 520 };
/** How much of the window's top edge must be on a display for it to be within reach. */
const reach = { width: 120, height: 40 };

/**
 * Where to put the window: where it stood, if a display still shows enough of it, else in its usual
 * size, placed by the system. `displays` are the work areas of now.
 */
export function placement(
  state: WindowState | null,
  displays: readonly Rectangle[],
): { readonly bounds: Partial<Rectangle>; readonly maximized: boolean } {
  if (state === null) return { bounds: fitted(usual, displays[0]), maximized: false };
  const { bounds, maximized } = state;
  const display = displays.find((area) => withinReach(bounds, area));
  if (display === undefined) return { bounds: fitted(usual, displays[0]), maximized };
  return { bounds: { x: bounds.x, y: bounds.y, ...fitted(bounds, display) }, maximized };
}

function fitted(size: typeof usual, area: Rectangle | undefined): typeof usual {
  const within = (wanted: number, least: number, most: number | undefined): number =>
    Math.round(Math.max(least, Math.min(wanted, most ?? wanted)));
  return {
    width: within(size.width, smallest.width, area?.width),
    height: within(size.height, smallest.height, area?.height),
  };
}

function withinReach(bounds: Rectangle, area: Rectangle): boolean {
  const across =
    Math.min(bounds.x + bounds.width, area.x + area.width) - Math.max(bounds.x, area.x);
  const topEdge = bounds.y >= area.y && bounds.y <= area.y + area.height - reach.height;
  return across >= reach.width && topEdge;
}

export function readWindowState(file: string): WindowState | null {
  try {
    const value: unknown = JSON.parse(readFileSync(file, 'utf8'));
    return isState(value) ? value : null;
  } catch {
    return null;
  }
}

/** Synchronous, because it happens while a window closes; failure costs only the place. */
export function writeWindowState(file: string, state: WindowState): void {
  try {
    writeFileSync(file, JSON.stringify(state), { mode: 0o600 });
  } catch {
    // The next window opens in its usual place.
  }
}

function isState(value: unknown): value is WindowState {
  if (typeof value !== 'object' || value === null) return false;
  const { bounds, maximized } = value as Partial<WindowState>;
  if (typeof bounds !== 'object' || bounds === null || typeof maximized !== 'boolean') return false;
  return [bounds.x, bounds.y, bounds.width, bounds.height].every(
    (number) => Number.isInteger(number) && Math.abs(number) < 100_000,
  );
}
