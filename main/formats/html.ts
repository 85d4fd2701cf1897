import { parse, type DefaultTreeAdapterTypes } from 'parse5';
import { deepest } from './limits.ts';
import type { ReadDocument, SideNote } from './read-file.ts';

type Node = DefaultTreeAdapterTypes.ChildNode | DefaultTreeAdapterTypes.Document;
type Element = DefaultTreeAdapterTypes.Element;

/** Elements that begin and end a line (WHATWG HTML, section 15.3: display block and list-item). */
const blocks: ReadonlySet<string> = new Set(
  (
    'address article aside blockquote body center dd details dialog dir div dl dt fieldset ' +
    'figcaption figure footer form h1 h2 h3 h4 h5 h6 header hgroup hr html legend li listing main ' +
    'menu nav ol optgroup option p plaintext pre search section summary table caption tbody thead ' +
    'tfoot tr ul xmp'
  ).split(' '),
);

/** Never shown as text. */
const silent: ReadonlySet<string> = new Set(
  (
    'head script style template noscript noframes noembed iframe object embed applet svg math ' +
    'canvas audio video select textarea button datalist rp rt title'
  ).split(' '),
);

export function isHtml(text: string, fileName: string): boolean {
  const beginning = text
    .slice(0, 4000)
    .replace(/^\s*(?:<\?xml[^>]*\?>|<!--[\s\S]*?-->|\s+)*/u, '')
    .toLowerCase();
  if (/^<!doctype\s+html\b|^<html\b/u.test(beginning)) return true;
  return /\.(?:html?|xhtml)$/iu.test(fileName) && /<(?:p|div|br|body|table|span)\b/iu.test(text);
}

/**
 * The text of a page as it would be read: a line a block, line breaks as they are, table cells of a
 * row with tabs between them. Programs, styles, forms and what is hidden are left out; nothing is
 * fetched or run. Footnotes that the page marks as such, and text marked as deleted, stand beside or
 * are left out.
 */
export function readHtml(text: string): ReadDocument {
  const lines = new Lines();
  const notes: SideNote[] = [];
  try {
    visit(parse(text), lines, notes, 0);
  } catch {
    // Deeper than any page that a person or a program would write.
    return { ok: false, code: 'broken file', format: 'html' };
  }
  return { ok: true, text: lines.all(), notes };
}

class Lines {
  readonly #lines: string[] = [];
  #line = '';
  #open = false;

  add(text: string, preformatted: boolean): void {
    if (preformatted) {
      text.split('\n').forEach((part, index) => {
        if (index > 0) this.breakLine();
        this.#line += part;
        if (part !== '') this.#open = true;
      });
      return;
    }
    const collapsed = text.replace(/[ \t\r\n\f]+/gu, ' ');
    const shown = /^$|[ \t\n]$/u.test(this.#line) ? collapsed.replace(/^ /u, '') : collapsed;
    this.#line += shown;
    if (shown !== '') this.#open = true;
  }

  breakLine(): void {
    this.#lines.push(this.#line.replace(/[ \t]+$/u, ''));
    this.#line = '';
    this.#open = false;
  }

  /** The edge of a block: ends a line that holds something. */
  edge(): void {
    if (this.#open) this.breakLine();
    else this.#line = '';
  }

  tab(): void {
    this.#line = `${this.#line.replace(/ $/u, '')}\t`;
    this.#open = true;
  }

  all(): string {
    this.edge();
    return this.#lines.join('\n');
  }
}

function visit(node: Node, lines: Lines, notes: SideNote[], depth: number, pre = false): void {
  if (depth > deepest) throw new Error('readHtml: too deep');
  if (node.nodeName === '#text') {
    lines.add((node as DefaultTreeAdapterTypes.TextNode).value, pre);
    return;
  }
  if (!('childNodes' in node)) return;
  const element = 'tagName' in node ? node : null;
  const name = element?.tagName ?? '';
  if (element !== null && isLeftOut(element, notes, depth)) return;
  if (name === 'br') {
    lines.breakLine();
    return;
  }
  if (name === 'td' || name === 'th') {
    const cell = new Lines();
    for (const child of node.childNodes) visit(child, cell, notes, depth + 1, pre);
    if (!isFirstCell(element!)) lines.tab();
    const content = cell.all().trim();
    content.split('\n').forEach((part, index) => {
      if (index > 0) lines.breakLine();
      lines.add(part, true);
    });
    return;
  }
  const isBlock = blocks.has(name);
  if (isBlock) lines.edge();
  const preformatted = pre || name === 'pre' || name === 'listing' || name === 'xmp';
  for (const child of node.childNodes) visit(child, lines, notes, depth + 1, preformatted);
  if (!isBlock) return;
  // A paragraph without words is an empty line, as it is on the page of an office suite.
  if (name === 'p' && isBlank(element!)) lines.breakLine();
  else lines.edge();
}

function isFirstCell(cell: Element): boolean {
  const row = cell.parentNode;
  if (row === null) return true;
  const first = row.childNodes.find((one) => one.nodeName === 'td' || one.nodeName === 'th');
  return first === cell;
}

function isBlank(element: Element): boolean {
  return element.childNodes.every(
    (child) =>
      (child.nodeName === '#text' &&
        (child as DefaultTreeAdapterTypes.TextNode).value.trim() === '') ||
      child.nodeName === '#comment',
  );
}

function isLeftOut(element: Element, notes: SideNote[], depth: number): boolean {
  const { tagName } = element;
  const value = (name: string): string =>
    element.attrs.find((attribute) => attribute.name === name)?.value ?? '';
  if (silent.has(tagName) || tagName === 'del' || tagName === 's') return true;
  const has = (name: string): boolean => element.attrs.some((one) => one.name === name);
  if (has('hidden') || /display\s*:\s*none/iu.test(value('style'))) return true;
  // Running heads of pages that an office suite wrote.
  if (tagName === 'div' && /^(?:header|footer)$/u.test(value('title'))) return true;
  const role = value('role');
  const kinds = value('class').split(/\s+/u);
  // The mark in the text, and the way back from the note.
  if (role === 'doc-noteref' || role === 'doc-backlink') return true;
  if (tagName === 'a' && /^(?:sdfootnote|sdendnote)\d+(?:anc|sym)$/u.test(value('name'))) {
    return true;
  }
  if (tagName === 'a' && kinds.some((kind) => /^(?:footnote-(?:ref|back))$/u.test(kind))) {
    return true;
  }
  const officeNote = /^sd(foot|end)note\d+$/u.exec(value('id'));
  const isList = role === 'doc-endnotes' || kinds.includes('footnotes');
  if (officeNote === null && !isList) return false;
  const items = officeNote === null ? descendantsNamed(element, 'li') : [element];
  for (const item of items) {
    const inside = new Lines();
    for (const child of item.childNodes) visit(child, inside, [], depth + 1);
    const text = inside.all().trim();
    const kind = officeNote?.[1] === 'end' ? 'endnote' : 'footnote';
    if (text !== '') notes.push({ kind, by: null, text });
  }
  return true;
}

function descendantsNamed(element: Element, name: string): Element[] {
  const found: Element[] = [];
  const waiting: Element[] = [element];
  while (waiting.length > 0) {
    const next = waiting.shift()!;
    for (const child of next.childNodes) {
      if (!('tagName' in child)) continue;
      if (child.tagName === name) found.push(child);
      else waiting.push(child);
    }
  }
  return found;
}
