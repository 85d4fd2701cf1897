import type { Span } from '../../../main/api.ts';

/*
 * Between the selection on the page and offsets in the transcript. A piece of text is an element
 * with `data-at`, its offset; it holds that text and nothing else, so lengths on the page are
 * lengths in the transcript. Numbers of notes are drawn by the style sheet and are no text.
 */

const piece = '[data-at]';

/** What is selected inside an element, as offsets without white space at its ends; null for nothing. */
export function selectedIn(column: Element, text: string): Span | null {
  const selection = document.getSelection();
  if (selection === null || selection.rangeCount === 0 || selection.isCollapsed) return null;
  const range = selection.getRangeAt(0);
  if (!column.contains(range.commonAncestorContainer)) return null;
  const touched = [...column.querySelectorAll<HTMLElement>(piece)].filter((element) =>
    range.intersectsNode(element),
  );
  const first = touched[0];
  const last = touched[touched.length - 1];
  if (first === undefined || last === undefined) return null;
  let start = first.contains(range.startContainer)
    ? offsetIn(first, range.startContainer, range.startOffset)
    : Number(first.dataset['at']);
  let end = last.contains(range.endContainer)
    ? offsetIn(last, range.endContainer, range.endOffset)
    : Number(last.dataset['at']) + (last.textContent ?? '').length;
  while (start < end && /\s/u.test(text[start]!)) start++;
  while (end > start && /\s/u.test(text[end - 1]!)) end--;
  return start < end ? { start, end } : null;
}

function offsetIn(element: HTMLElement, container: Node, offset: number): number {
  const before = document.createRange();
  before.setStart(element, 0);
  before.setEnd(container, offset);
  return Number(element.dataset['at']) + before.toString().length;
}

/** Selects a stretch of the transcript on the page, as far as it is shown. */
export function select(column: Element, { start, end }: Span): void {
  const from = pointAt(column, start, false);
  const to = pointAt(column, end, true);
  if (from === null || to === null) return;
  document.getSelection()?.setBaseAndExtent(from.node, from.offset, to.node, to.offset);
}

function pointAt(
  column: Element,
  offset: number,
  closing: boolean,
): { node: Node; offset: number } | null {
  for (const element of column.querySelectorAll<HTMLElement>(piece)) {
    let at = Number(element.dataset['at']);
    const length = (element.textContent ?? '').length;
    const inside = closing
      ? at < offset && offset <= at + length
      : at <= offset && offset < at + length;
    if (!inside) continue;
    const walker = document.createTreeWalker(element, NodeFilter.SHOW_TEXT);
    for (let node = walker.nextNode(); node !== null; node = walker.nextNode()) {
      const size = (node.nodeValue ?? '').length;
      if (closing ? offset <= at + size : offset < at + size) return { node, offset: offset - at };
      at += size;
    }
  }
  return null;
}

/** Words of some stretches, for selecting by keyboard; punctuation belongs to no word. */
export function wordsIn(text: string, pieces: readonly Span[]): Span[] {
  const segmenter = new Intl.Segmenter(undefined, { granularity: 'word' });
  return pieces.flatMap(({ start, end }) =>
    [...segmenter.segment(text.slice(start, end))]
      .filter(({ isWordLike }) => isWordLike)
      .map(({ index, segment }) => ({
        start: start + index,
        end: start + index + segment.length,
      })),
  );
}
