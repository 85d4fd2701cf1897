/** What a single key can do in Read, with the key that is usual for it. */
export const usualKeys = {
  next: 'j',
  previous: 'k',
  reject: 'n',
  none: 'o',
  another: 't',
  select: 'v',
  code: 'c',
  memo: 'm',
  undo: 'u',
  list: 'l',
  search: 's',
  keys: '?',
} as const;

export type KeyAction = keyof typeof usualKeys;

export const keyActions = Object.keys(usualKeys) as readonly KeyAction[];

type Own = Readonly<Record<string, string>>;

/** The key of an action: the person's own, else the usual one. */
export function keyOf(action: KeyAction, own: Own): string {
  const chosen = Object.hasOwn(own, action) ? own[action] : undefined;
  return chosen !== undefined && isUsable(chosen) ? chosen : usualKeys[action];
}

/** What a pressed key does; null for nothing. Capitals count as their small letters. */
export function actionFor(pressed: string, own: Own): KeyAction | null {
  const key = small(pressed);
  return keyActions.find((action) => keyOf(action, own) === key) ?? null;
}

export type KeyFault = { readonly taken: KeyAction } | 'unusable';

/** The person's own keys with another one for an action, or why it cannot be that. */
export function withKey(
  action: KeyAction,
  typed: string,
  own: Own,
): { readonly keys: Own } | { readonly fault: KeyFault } {
  const key = small(typed);
  if (!isUsable(key)) return { fault: 'unusable' };
  const other = actionFor(key, own);
  if (other !== null && other !== action) return { fault: { taken: other } };
  const kept = Object.fromEntries(Object.entries(own).filter(([name]) => name !== action));
  return { keys: key === usualKeys[action] ? kept : { ...kept, [action]: key } };
}

/** One visible character; digits are the first nine themes. */
function isUsable(key: string): boolean {
  return [...key].length === 1 && !/[\s\d]/u.test(key);
}

function small(key: string): string {
  const lower = key.toLowerCase();
  return [...lower].length === 1 ? lower : key;
}
