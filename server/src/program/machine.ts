import type { Graph } from '../expression/graph';
import type { Expr } from '../expression/node';
import type { Place, Span } from '../text/span';
import type { ArgumentValue } from './parameters';
import type { Outcome } from './flow';
import type { ClassNode, Expression, FunctionNode, Member, Statement } from './form';
import type { ClassInfo, Module, Scope } from './scope';
import type { Library } from './library';
import type { Ambiguity, BindingMade, Drop, Meaning, ReadRequest, TraceEntry } from './reading';
import { Naming } from './naming';
import { factsOf, memberIsAssigned, type MemberWrite } from './facts';
import { Store } from './store';
import { typedArray } from './integers';
import { isData, unread, type Assigned, type Data, type FunctionValue, type ObjectValue, type Unread, type Value } from './values';

/** Expressions and statements nested deeper than this are not read, so that the reading never exhausts the stack. */
const DEEPEST = 900;

/** Location of the condition under which an error was thrown: such points do not vote. */
export const DEAD = 0;

export interface Construction {
  readonly id: number;
  /** What the instance is called in the code that is read. */
  readonly path: string;
  /** Set where fields keep what the constructor gives them, with the places, whatever they mean. */
  readonly places?: Map<string, Place>;
}

export interface Belief {
  readonly meaning: Meaning;
  readonly how: 'reads' | 'name';
  readonly assigned: () => Assigned | undefined;
}

/** The state of one reading. */
export class Machine {
  readonly graph: Graph;
  store: Store;
  readonly naming: Naming;
  readonly modules = new Map<string, Module>();
  readonly bindings = new Map<string, BindingMade>();
  readonly ambiguities = new Map<string, Ambiguity>();
  readonly free = new Map<Expr, { readonly code: string; readonly reason: string; readonly place: Place }>();
  readonly conditions = new Map<Expr, Place>();
  readonly assumed: Expr[] = [];
  /** Conditions that hold on the branch that is being read. */
  readonly facts: Expr[] = [];
  /** Why reading stopped before a function's end. */
  cut: Unread | undefined;
  /** Conditions of `assume` by their shape, for those whose names are not known at the function's entry. */
  readonly assumedShapes = new Map<string, boolean>();
  /** Flags and kinds that `assume` settles, by path. */
  readonly given = new Map<string, Value>();
  readonly trace: TraceEntry[] = [];
  /** Where integers lost what is behind the point. */
  readonly drops = new Map<string, Drop>();
  /** Local variables that are claimed as outputs. */
  readonly claimedNames = new Set<string>();
  readonly files = new Set<string>();
  /** Conditions on entries under which the right side of an assignment is being read, by their shapes. */
  readonly masks: string[] = [];
  /** Above zero while a loop is only looked over, or an output is read: nothing is recorded and nothing replaced. */
  quiet = 0;
  /** Above zero where a count is wanted: fields that hold a literal give it. */
  counting = 0;
  /** Set at the start of a reading, so that what is below the evaluator can ask for a value. */
  /**
   * What the files of the executor ask of one another in circles; `read` fills it in, so that none has to import a file
   * that needs it.
   */
  evaluate: (scope: Scope, e: Expression) => Value = () => unread('an expression', undefined);
  execute: (scope: Scope, body: readonly Statement[]) => Outcome = () => ({ exits: [], normal: true });
  invoke: (f: FunctionValue, self: Value | undefined, args: readonly ArgumentValue[], place: Place) => Value = () =>
    unread('a call', undefined);
  callFunction: (module: Module, f: Value, args: readonly Value[], place: Place) => Value = () => unread('a call', undefined);
  openModule: (module: Module, from: string) => Module | undefined = () => undefined;
  exportOf: (module: Module, name: string, place: Place) => Value = () => unread('an import', undefined);
  readElement: (module: Module, object: Value, key: Value, place: Place) => Value = () => unread('an element', undefined);
  /** Runs a function of the file on generic arguments, from the state at the subject's entry. */
  runSeparately: (f: FunctionValue) => Value = () => unread('a call', undefined);
  /** Set while an output is read, so that values keep the place that made them. */
  keepPlaces = false;
  calls = 0;
  /** The functions that are running, each with how many undecided conditions held when it was called. */
  readonly running: { readonly node: FunctionNode; readonly facts: number }[] = [];
  /** The expression of the statement that is being run, whose value goes nowhere. */
  discarded: Expression | undefined;
  /** The call in the project's own code under which a package's meaning is being worked out. */
  callSite: Place | undefined;
  readonly classes = new Map<ClassNode, ClassInfo>();
  /** Things that a class body made, which all instances share. */
  readonly sharedFields = new Map<Member, ObjectValue>();
  /** The instance that a constructor is making from generic arguments: what its fields mean by `reads` or name, they are. */
  constructing: Construction | undefined;
  /** Meanings that were taken as said for places of which the code itself says what they are, by path. */
  readonly believed = new Map<string, Belief>();
  /** How many instances were made from generic arguments. */
  constructions = 1;
  /** Those instances by class and by what they are called. */
  readonly instances = new Map<ClassNode, Map<string, ObjectValue>>();
  readonly frameNames = new Set<number>();
  private readonly firstNames = new Map<Library, Set<string>>();
  private readonly functionMembers = new Map<FunctionNode, number>();
  /** Above zero inside one pass from a generic state. */
  inGenericPass = 0;
  /** Values that locals had at the start of such a pass, for claims about increments. */
  readonly entries = new Map<string, Value>();
  /** Things from outside that the code names without declaring. */
  readonly globals = new Map<string, Value>();
  private depth = 0;
  private stop: Unread | undefined;

  constructor(
    readonly request: ReadRequest,
    forcedFree: ReadonlySet<string>,
  ) {
    this.graph = request.graph;
    this.store = new Store();
    this.store.set(DEAD, { kind: 'condition', expr: this.graph.false });
    this.naming = new Naming(this, forcedFree);
  }

  place(scope: Scope, span: Span): Place {
    const { module } = scope.frame;
    if (module.isMeaning) return this.callSite ?? { file: this.request.file, span: { start: 0, end: 0 } };
    return { file: module.file, span };
  }

  /** The reason why nothing more is read, once the budget is spent. */
  get stopped(): Unread | undefined {
    return this.stop;
  }

  spend(place: () => Place): Unread | undefined {
    if (this.stop) return this.stop;
    if (this.request.budget.spend()) return undefined;
    this.stop = unread(`${this.request.budget.reason}; reading had come to this place`, place());
    return this.stop;
  }

  /** Runs `body` one level deeper, or gives the reason why not. */
  nested<T>(place: () => Place, body: () => T, tooDeep: (u: Unread) => T): T {
    if (this.depth >= DEEPEST) {
      // What it would have changed is not known: nothing that follows is read.
      this.stop ??= unread('this is nested too deeply to be read', place());
      return tooDeep(this.stop);
    }
    this.depth++;
    try {
      return body();
    } finally {
      this.depth--;
    }
  }

  dropped(drop: Drop): void {
    if (!this.quiet && !this.keepPlaces) this.drops.set(`${drop.place.file} ${drop.place.span.start} ${drop.place.span.end}`, drop);
  }

  note(place: Place, expr: Expr): void {
    if (!this.quiet && !this.keepPlaces) this.trace.push({ place, expr });
  }

  object(data: Data): ObjectValue {
    return { kind: 'object', id: this.store.add(data) };
  }

  list(items: readonly Value[], array = false): ObjectValue {
    return this.object(array && this.request.program.integers ? typedArray(this, items) : { kind: 'list', items: [...items], array });
  }

  scalar(expr: Expr, place?: Place): Value {
    return { kind: 'scalar', expr, place };
  }

  /** Does something with the bottom layer of the store, which all branches see. */
  atRoot<T>(body: () => T): T {
    const before = this.store;
    this.store = before.root;
    try {
      return body();
    } finally {
      this.store = before;
    }
  }

  /** Marks the rest of this branch as one that ends in an error. */
  die(): void {
    this.store.set(DEAD, { kind: 'condition', expr: this.graph.true });
  }

  get dead(): Expr {
    const v = this.store.value(DEAD);
    return v?.kind === 'condition' ? v.expr : this.graph.false;
  }

  /** Where the members of a function itself are kept (`F.prototype`). */
  membersOf(node: FunctionNode): number {
    let id = this.functionMembers.get(node);
    if (id === undefined) {
      id = this.atRoot(() => this.store.add({ kind: 'record', members: new Map() }));
      this.functionMembers.set(node, id);
    }
    return id;
  }

  /** True where a column is a list of rows of one, apart from a plain list. */
  get columnsMatter(): boolean {
    return this.request.program.matrixProduct === true;
  }

  /** The first parts of a library's names: `Math`. */
  libraryNames(library: Library): ReadonlySet<string> {
    let names = this.firstNames.get(library);
    if (!names) {
      names = new Set();
      for (const table of [library.scalars, library.constants, library.intrinsics]) {
        for (const key of table.keys()) names.add(key.split('.')[0]!);
      }
      for (const key of library.ignorable) names.add(key.split('.')[0]!);
      this.firstNames.set(library, names);
    }
    return names;
  }

  /** True for the record that holds a running function's locals by name. */
  isFrameNames(id: number): boolean {
    return this.frameNames.has(id);
  }

  setMember(object: ObjectValue, key: string, value: Value): void {
    const data = this.store.writable(object.id);
    if (data.kind === 'record' || data.kind === 'generic') data.members.set(key, value);
  }

  /** Makes what is stored there unread. */
  spoilLocation(location: number, why: Unread): void {
    const content = this.store.get(location);
    if (content) this.store.set(location, isData(content) ? { kind: 'broken', unread: why } : why);
  }

  breakObject(id: number, why: Unread): void {
    const content = this.store.get(id);
    // What is done to a view is done to what it shows.
    if (content?.kind === 'list' && content.view) for (const part of content.view) this.store.set(part.id, { kind: 'broken', unread: why });
    this.store.set(id, { kind: 'broken', unread: why });
  }

  isAssignedMember(name: string): boolean {
    for (const module of this.modules.values()) if (memberIsAssigned(module.program, name)) return true;
    return false;
  }

  /**
   * True where a field of instances of a class has the value it was made with: nothing writes it but constructors, or one
   * single place of the class, which then is called from there.
   */
  isSetOnce(family: ReadonlySet<ClassNode>, name: string): boolean {
    const writes: MemberWrite[] = [];
    for (const module of this.modules.values()) writes.push(...(factsOf(module.program).memberWrites.get(name) ?? []));
    const others = writes.filter((w) => !w.inConstructor && (!w.owner || family.has(w.owner) || w.owner.base !== undefined));
    if (others.length === 0) return true;
    const all = writes.filter((w) => !w.owner || family.has(w.owner));
    return others.length === 1 && all.length === 1 && others[0]!.owner !== undefined && family.has(others[0]!.owner);
  }

  /** Works out what a package means by a call, of whose parts nothing is recorded. */
  meaning<T>(module: Module, place: Place, body: () => T): T {
    if (!module.isMeaning) return body();
    const before = this.callSite;
    this.callSite = before ?? place;
    try {
      return body();
    } finally {
      this.callSite = before;
    }
  }

  /** Does something on a branch on which a condition holds. */
  onBranch<T>(fact: Expr, body: () => T): T {
    this.facts.push(fact);
    const result = body();
    this.facts.pop();
    return result;
  }

  /** Notes that a place is taken for what it is said to mean, although the code says itself what it is. */
  believe(path: string, belief: Belief): void {
    if (!this.believed.has(path)) this.believed.set(path, belief);
  }

  /** A place whose meaning is not to be believed, as a symbol that nothing is known of. */
  doubted(path: string): Expr | undefined {
    const why = this.request.contradicted?.get(path);
    return why && this.freeSymbol(path, why.reason, why.place);
  }

  condition(expr: Expr, place: Place): void {
    if (!this.quiet && !this.conditions.has(expr)) this.conditions.set(expr, place);
  }

  ambiguous(words: string, place: Place): void {
    const message = this.inWords(words);
    if (!this.ambiguities.has(message)) this.ambiguities.set(message, { message, place });
  }

  /** Words for people, in which the receiver is called as the source calls it. */
  inWords(text: string): string {
    const { selfWord } = this.request.program;
    return selfWord === undefined ? text : text.replace(/\bthis(?=[.\[(])/g, selfWord);
  }

  freeSymbol(path: string, reason: string, place: Place): Expr {
    const symbol = this.graph.symbol({ name: path, role: 'free', order: 0 });
    if (!this.free.has(symbol)) this.free.set(symbol, { code: this.inWords(path), reason: this.inWords(reason), place });
    return symbol;
  }
}
