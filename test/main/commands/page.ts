interface Piece {
  readonly tag: string;
  readonly attributes: string;
  text: string;
}

const withoutEnd = new Set(['meta', 'br', 'link', 'img', 'hr']);

/** The elements of a page in the order of their ends; throws where tags do not nest. */
export function elementsOf(page: string): Piece[] {
  const open: Piece[] = [];
  const done: Piece[] = [];
  for (const [token] of page.matchAll(/<style>[^<]*<\/style>|<[^>]*>|[^<]+/gu)) {
    const tag = /^<(\/?)([a-z]\w*)((?:\s+[a-z-]+(?:="[^"<]*")?)*)\s*(\/?)>$/u.exec(token);
    if (tag === null) {
      if (token.startsWith('<') && !/^<(!doctype html>$|style>)/u.test(token)) {
        throw new Error(`elementsOf: page holds ${token}, which is no tag`);
      }
      if (!token.startsWith('<')) for (const piece of open) piece.text += plain(token);
      continue;
    }
    const [, end, name, attributes, empty] = tag;
    if (end === '') {
      const piece = { tag: name, attributes, text: '' };
      if (withoutEnd.has(name) || empty !== '') {
        if (name === 'br') for (const each of open) each.text += '\n';
        done.push(piece);
      } else open.push(piece);
      continue;
    }
    const piece = open.pop();
    if (piece?.tag !== name) throw new Error(`elementsOf: page ends ${name} within ${piece?.tag}`);
    done.push(piece);
  }
  if (open.length > 0) throw new Error(`elementsOf: page leaves ${open[0].tag} open`);
  return done;
}

export function textsOf(page: string, tag: string): string[] {
  return elementsOf(page)
    .filter((piece) => piece.tag === tag)
    .map(({ text }) => text);
}

function plain(text: string): string {
  return text
    .replaceAll('&lt;', '<')
    .replaceAll('&gt;', '>')
    .replaceAll('&quot;', '"')
    .replaceAll('&amp;', '&');
}
