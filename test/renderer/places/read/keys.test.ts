import { describe, expect, it } from 'vitest';
import { actionFor, keyOf, withKey } from '../../../../renderer/places/read/keys.ts';

describe('single keys', () => {
  it('are the usual ones until a person chooses others', () => {
    expect(keyOf('next', {})).toBe('j');
    expect(actionFor('j', {})).toBe('next');
    expect(actionFor('J', {})).toBe('next');
    expect(actionFor('q', {})).toBeNull();
    const own = { next: 'd' };
    expect(actionFor('d', own)).toBe('next');
    expect(actionFor('j', own)).toBeNull();
  });

  it('take any other character, and give up their own for the usual one again', () => {
    expect(withKey('next', 'D', {})).toEqual({ keys: { next: 'd' } });
    expect(withKey('next', 'ж', {})).toEqual({ keys: { next: 'ж' } });
    expect(withKey('next', 'j', { next: 'd', none: 'x' })).toEqual({ keys: { none: 'x' } });
  });

  it('are refused where they mean something else, or are no character', () => {
    expect(withKey('next', 'k', {})).toEqual({ fault: { taken: 'previous' } });
    expect(withKey('next', 'k', { previous: 'p' })).toEqual({ keys: { previous: 'p', next: 'k' } });
    for (const typed of ['', ' ', '1', 'ab', '\n']) {
      expect(withKey('next', typed, {})).toEqual({ fault: 'unusable' });
    }
  });

  it('are the usual ones where what was kept makes no sense', () => {
    expect(keyOf('next', { next: 'abc' })).toBe('j');
    expect(keyOf('next', { next: '4' })).toBe('j');
  });
});
