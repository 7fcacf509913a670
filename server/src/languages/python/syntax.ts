import type { Language, Tree } from 'web-tree-sitter';

/** A node of the syntax tree, copied out of the parser's memory so that nothing there has to outlive a parse. */
export interface Node {
  readonly type: string;
  readonly start: number;
  readonly end: number;
  /** What it is to its parent: `left`, `body`. */
  readonly field: string | undefined;
  readonly isNamed: boolean;
  /** Something below is no Python, or lacks. */
  readonly isBroken: boolean;
  readonly children: readonly Node[];
}

export interface Syntax {
  readonly root: Node;
  /** In order of their places; they are not among the children. */
  readonly comments: readonly Node[];
}

type Draft = { -readonly [K in keyof Node]: K extends 'children' ? Node[] : Node[K] };

const SKIPPED = new Set(['comment', 'line_continuation']);

/** A copy of the whole tree. Iterative: brackets may nest to any depth. */
export function copyTree(language: Language, tree: Tree): Syntax {
  const { types, fields } = language;
  const cursor = tree.walk();
  const comments: Node[] = [];
  // Each question to the cursor is a call into the parser's memory, so none is asked twice.
  const make = (): Draft => {
    const id = cursor.nodeTypeId;
    const type = types[id] ?? cursor.nodeType;
    const start = cursor.startIndex;
    const end = cursor.endIndex;
    return {
      type,
      start,
      end,
      field: fields[cursor.currentFieldId] ?? undefined,
      isNamed: language.nodeTypeIsNamed(id),
      isBroken: type === 'ERROR' || (start === end && cursor.nodeIsMissing),
      children: [],
    };
  };
  const root = make();
  const open: Draft[] = [root];
  try {
    let goesDown = true;
    for (;;) {
      if (goesDown && cursor.gotoFirstChild()) {
        open.push(make());
        continue;
      }
      const done = open.pop()!;
      const parent = open[open.length - 1];
      if (!parent) break;
      if (done.type === 'comment') comments.push(done);
      if (!SKIPPED.has(done.type)) parent.children.push(done);
      parent.isBroken ||= done.isBroken;
      goesDown = cursor.gotoNextSibling();
      if (goesDown) open.push(make());
      else cursor.gotoParent();
    }
  } finally {
    cursor.delete();
  }
  return { root, comments };
}

export function child(node: Node, field: string): Node | undefined {
  return node.children.find((c) => c.field === field);
}

export function children(node: Node, field: string): Node[] {
  return node.children.filter((c) => c.field === field);
}

export function namedChildren(node: Node): Node[] {
  return node.children.filter((c) => c.isNamed);
}

/** Every node below `start` and itself, parents first. */
export function* nodesOf(start: Node, enters: (node: Node) => boolean = () => true): Generator<Node> {
  const stack = [start];
  for (let node = stack.pop(); node; node = stack.pop()) {
    yield node;
    if (node !== start && !enters(node)) continue;
    for (let i = node.children.length - 1; i >= 0; i--) stack.push(node.children[i]!);
  }
}
