import { textBetween } from './text';
import { namedChildren, nodesOf, type Node } from './syntax';

/**
 * Which names the function (or module) being converted has bound so far. Python has no declarations: the first assignment
 * to a name becomes one in the program form, later ones are assignments.
 */
export class Bindings {
  /** In a class body: the names it has bound so far, which its later lines see, but not its methods. */
  readonly classNames?: Set<string>;
  private readonly bound: Set<string>;
  private readonly outer: ReadonlySet<string>;

  constructor(
    readonly parent: Bindings | undefined,
    parameters: readonly string[],
    /** `global` and `nonlocal` names: never bound here. */
    outer: ReadonlySet<string>,
    /** The name of the instance or class inside a method, `self`; functions within a method see it too. */
    readonly receiver: string | undefined,
    /** At a module's top: names that something assigns to later. */
    private readonly changing: ReadonlySet<string> = new Set(),
    isClassBody = false,
  ) {
    if (isClassBody) this.classNames = new Set();
    this.bound = new Set(parameters);
    this.outer = outer;
  }

  get isModule(): boolean {
    return this.parent === undefined;
  }

  /** True where this is the first assignment to the name, which is thereby known. */
  bind(name: string): boolean {
    if (this.bound.has(name) || this.outer.has(name)) return false;
    this.bound.add(name);
    return true;
  }

  isBound(name: string): boolean {
    return this.bound.has(name);
  }

  isReceiver(name: string): boolean {
    return this.receiver === name;
  }

  isMutable(name: string): boolean {
    return !this.isModule || this.changing.has(name);
  }
}

const FUNCTIONS = new Set(['function_definition', 'lambda', 'class_definition']);

/** Names that `global` or `nonlocal` take from outside, in this function itself. */
export function outerNames(text: string, body: Node): Set<string> {
  const names = new Set<string>();
  if (!/\b(?:global|nonlocal)\b/.test(text.slice(body.start, body.end))) return names;
  for (const node of nodesOf(body, (n) => !FUNCTIONS.has(n.type))) {
    if (node.type !== 'global_statement' && node.type !== 'nonlocal_statement') continue;
    for (const n of namedChildren(node)) names.add(textBetween(text, n));
  }
  return names;
}

/** Module variables that are no constants: assigned several times at the top, or by a function that says `global`. */
export function changingNames(text: string, root: Node): Set<string> {
  const changing = new Set<string>();
  const seen = new Set<string>();
  for (const node of /\bglobal\b/.test(text) ? nodesOf(root) : []) {
    if (node.type === 'global_statement') for (const n of namedChildren(node)) changing.add(textBetween(text, n));
  }
  for (const node of nodesOf(root, (n) => !FUNCTIONS.has(n.type))) {
    if (node.type === 'augmented_assignment' || node.type === 'for_statement') {
      for (const n of namesIn(text, node.children.find((x) => x.field === 'left'))) changing.add(n);
    }
    if (node.type !== 'assignment') continue;
    for (const n of namesIn(text, node.children.find((x) => x.field === 'left'))) {
      if (seen.has(n)) changing.add(n);
      seen.add(n);
    }
  }
  return changing;
}

function namesIn(text: string, target: Node | undefined): string[] {
  if (!target) return [];
  if (target.type === 'identifier') return [textBetween(text, target)];
  if (!/^(pattern_list|tuple_pattern|list_pattern|list_splat_pattern)$/.test(target.type)) return [];
  return namedChildren(target).flatMap((n) => namesIn(text, n));
}
