import type { Expr } from '../expression/node';
import type { Place } from '../text/span';
import type { FunctionNode, Parameter } from './form';
import type { ClassInfo, Module, Scope } from './scope';
import type { Typed } from './type-notes';

/**
 * What an expression of the code can be. Values are immutable; whatever can change (variables, lists, records, generic
 * things) is a location of the store, and a value only refers to it.
 */
export type Value =
  | Scalar
  | Condition
  | { readonly kind: 'string'; readonly value: string }
  /** `isNull`: written in the code as a value of its own, for which no default stands in. */
  | { readonly kind: 'nothing'; readonly isNull?: boolean }
  /** A list, record, instance or generic thing: its contents are in the store. */
  | ObjectValue
  | FunctionValue
  | ClassValue
  /** A name of the language's numeric library: `Math`, `Math.sin`. */
  | LibraryValue
  /** A method of the library taken from a receiver: `xs.map`. */
  | { readonly kind: 'method'; readonly intrinsic: string; readonly self: Value }
  | { readonly kind: 'module'; readonly module: Module }
  /** Two values of different shape, one of which holds by a condition that is not decided. */
  | ChoiceValue
  | Unread;

export interface Scalar {
  readonly kind: 'scalar';
  readonly expr: Expr;
  readonly place?: Place;
  /** Within limits: the clip that was taken out to get here. */
  readonly clip?: Clip;
  /** In languages that tell them apart: an integer, whatever the values from outside are. */
  readonly integer?: boolean;
}

/** The bounds of a clip, and the clip as written. */
export interface Clip {
  readonly min?: Expr;
  readonly max?: Expr;
  readonly whole: Expr;
}

export interface Condition {
  readonly kind: 'condition';
  readonly expr: Expr;
  readonly place?: Place;
}

export interface ObjectValue {
  readonly kind: 'object';
  readonly id: number;
}

export interface FunctionValue {
  readonly kind: 'function';
  readonly node: FunctionNode;
  readonly scope: Scope;
  /** The receiver of a bound method, or the one an arrow function closes over. */
  readonly self?: Value;
  /** The class a method belongs to, for `super`. */
  readonly home?: ClassInfo;
  /** Defaults of parameters that were worked out where the function was defined. */
  readonly defaults?: ReadonlyMap<Parameter, Value>;
}

export interface ClassValue {
  readonly kind: 'class';
  readonly info: ClassInfo;
}

export interface LibraryValue {
  readonly kind: 'library';
  readonly path: string;
  readonly module: Module;
}

export interface ChoiceValue {
  readonly kind: 'choice';
  readonly condition: Expr;
  readonly whenTrue: Value;
  readonly whenFalse: Value;
}

export interface Unread {
  readonly kind: 'unread';
  /** In words that complete "can't be read: ...". */
  readonly reason: string;
  readonly place: Place | undefined;
}

/** Contents of an object, in the store. A layer of the store that owns one may change it in place. */
export type Data = ListData | RecordData | GenericData | BrokenData;

/** A thing that is no longer known. */
export interface BrokenData {
  readonly kind: 'broken';
  readonly unread: Unread;
  /** Where only elements at indices that are not known were written: what was written, newest first. */
  readonly cells?: readonly Cell[];
}

export interface Cell {
  readonly keys: readonly Expr[];
  readonly value: Value;
}

export interface ListData {
  readonly kind: 'list';
  items: Value[];
  /** A numeric vector, on which operators work element by element. */
  readonly array: boolean;
  /** Known from a declaration only: in languages that have both, it could be a plain list or a numeric vector. */
  readonly outside?: boolean;
  /** A part of other lists: item k is theirs, so that writing to either shows in both. */
  readonly view?: readonly ViewItem[];
  /** A numeric vector that holds integers only: what is written to it loses its fraction. */
  readonly integer?: boolean;
  /** Its length is not known: it takes the shape of what is written to it. */
  readonly open?: boolean;
  /** Why it is not known what else a write to it would change. */
  readonly held?: Unread;
}

export interface ViewItem {
  /** The list in the store. */
  readonly id: number;
  /** From 0. */
  readonly at: number;
}

export interface RecordData {
  readonly kind: 'record';
  readonly members: Map<string, Value>;
  readonly getters?: Map<string, FunctionValue>;
  readonly setters?: Map<string, FunctionValue>;
  readonly info?: ClassInfo;
  /** Writing to it does nothing, or throws an error. */
  readonly frozen?: boolean;
  /** Where members are looked up that it lacks itself. */
  readonly prototype?: number;
  /** Why it is not known what else a write to it would change. */
  readonly held?: Unread;
}

/** A thing from outside: only the members the code has written are stored. */
export interface GenericData {
  readonly kind: 'generic';
  readonly generic: Generic;
  /** The thing it is a copy of, whose members of its own it shares. */
  readonly copyOf?: number;
  readonly members: Map<string, Value>;
}

/** What is known of a thing from outside, the same on every branch. */
export interface Generic {
  readonly path: string;
  /** Other names the code gave it. */
  readonly aliases: string[];
  readonly place: Place;
  readonly info?: ClassInfo;
  /** What its declared type says. */
  readonly typed?: Typed;
  /** Its value where neither `reads` nor its name gives one: a field's initialiser, say. */
  readonly fallback?: () => Value | undefined;
  /** What the code itself says it is: the constructor of its class, the body of a getter. */
  readonly assigned?: () => Assigned | undefined;
  /** Members its file gives it once, after it is made: `config.total = ...` beside `const config = {...}`. */
  readonly later?: ReadonlyMap<string, () => Value>;
  /** True where nothing changes it, so that a literal initial value is its value. */
  readonly constant?: boolean;
  /** Where it comes from, in words that begin a sentence, if that is why nothing says what it means. */
  readonly origin?: string;
  /** True for what a computation gave that is not known: the names of its parts say nothing of what they are. */
  readonly computed?: boolean;
  /** True once it was looked at whether it is a list. */
  structured?: boolean;
}

/** What the code itself gives to a place whose meaning `reads` or its name says. */
export interface Assigned {
  readonly value: Value;
  readonly place: Place;
  /** True for a symbol that something else means there, such as a parameter of the constructor. */
  hasSymbol(symbol: Expr): boolean;
}

export type Content = Value | Data;

export function isData(content: Content): content is Data {
  const k = content.kind;
  return k === 'list' || k === 'record' || k === 'generic' || k === 'broken';
}

export const NOTHING: Value = { kind: 'nothing' };

export function unread(reason: string, place: Place | undefined): Unread {
  return { kind: 'unread', reason, place };
}

export function isUnread(x: Expr | Value): x is Unread {
  return 'kind' in x && x.kind === 'unread';
}
