import { isData, type Content, type Data, type ListData, type Unread, type Value, type ViewItem } from './values';

/**
 * Everything that can change, in layers: a branch writes to a layer of its own, and only what it wrote is merged. A store
 * is written only while it is the topmost one of its branch.
 */
export class Store {
  private readonly own = new Map<number, Content>();

  constructor(
    readonly parent?: Store,
    private readonly counter: { next: number } = { next: 1 },
  ) {}

  child(): Store {
    return new Store(this, this.counter);
  }

  get root(): Store {
    let s: Store = this;
    while (s.parent) s = s.parent;
    return s;
  }

  /** A location that no other shares. */
  reserve(): number {
    return this.counter.next++;
  }

  get(location: number): Content | undefined {
    let s: Store | undefined = this;
    while (s) {
      const c = s.own.get(location);
      if (c !== undefined) return c;
      s = s.parent;
    }
    return undefined;
  }

  value(location: number): Value | undefined {
    const c = this.get(location);
    return c && !isData(c) ? c : undefined;
  }

  data(location: number): Data {
    const c = this.get(location);
    if (c && isData(c)) return c.kind === 'list' && c.view ? this.seen(c, c.view) : c;
    return { kind: 'broken', unread: { kind: 'unread', reason: 'a thing used before it is made', place: undefined } };
  }

  /** A view with what its lists hold now. */
  private seen(list: ListData, view: readonly ViewItem[]): Data {
    const items: Value[] = [];
    for (const { id, at } of view) {
      const source = this.get(id);
      if (source?.kind === 'broken') return source;
      items.push((source?.kind === 'list' ? source.items[at] : undefined) ?? { kind: 'nothing' });
    }
    return { ...list, items };
  }

  set(location: number, content: Content): void {
    this.own.set(location, content);
  }

  add(data: Data): number {
    const location = this.reserve();
    this.own.set(location, data);
    return location;
  }

  /** The contents of an object, ready to be changed in this layer. */
  writable(location: number): Data {
    const mine = this.own.get(location);
    const data = mine && isData(mine) ? mine : this.data(location);
    if ((data.kind === 'list' || data.kind === 'record') && data.held) return this.break(location, data, data.held);
    if (mine === data) return data;
    const copy = copyData(data);
    this.own.set(location, copy);
    return copy;
  }

  /** Lets a list be written to whose writing was held back. */
  thaw(location: number): void {
    const data = this.data(location);
    if (data.kind !== 'list') return;
    const { held: _, ...rest } = data;
    this.own.set(location, copyData(rest));
  }

  /** Breaks an object, and of a view what it shows. */
  private break(location: number, data: Data, why: Unread): Data {
    const broken: Data = { kind: 'broken', unread: why };
    if (data.kind === 'list') for (const part of data.view ?? []) this.own.set(part.id, broken);
    this.own.set(location, broken);
    return broken;
  }

  /** What was written since `base`, the newest of each location. */
  changesSince(base: Store): Map<number, Content> {
    const layers: Store[] = [];
    for (let s: Store | undefined = this; s && s !== base; s = s.parent) layers.push(s);
    if (layers.length === 1) return layers[0]!.own;
    const changes = new Map<number, Content>();
    for (const layer of layers.reverse()) for (const [k, v] of layer.own) changes.set(k, v);
    return changes;
  }
}

function copyData(data: Data): Data {
  switch (data.kind) {
    case 'list':
      return { ...data, items: [...data.items] };
    case 'record':
    case 'generic':
      return { ...data, members: new Map(data.members) };
    case 'broken':
      return data;
  }
}
