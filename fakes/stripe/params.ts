import { invalid, missing } from './errors.ts';

/** What a form-encoded body or a query means once its brackets are read. */
export type Tree = string | Tree[] | { [name: string]: Tree };

const isBranch = (tree: Tree | undefined): tree is { [name: string]: Tree } => typeof tree === 'object' && !Array.isArray(tree);

/** Reads `a[b][0]=c` pairs into nested objects; numbered and empty brackets make lists. */
export function parseForm(text: string): { [name: string]: Tree } {
  const root: { [name: string]: Tree } = Object.create(null) as { [name: string]: Tree };
  for (const [key, value] of new URLSearchParams(text)) {
    const names = [...key.matchAll(/^[^[\]]+|\[([^[\]]*)\]/g)].map((match) => match[1] ?? match[0].replace(/^\[\]$/, ''));
    if (names.length === 0 || names.length > 8) throw invalid(`Invalid parameter name: ${key}`);
    let branch = root;
    for (const [depth, name] of names.entries()) {
      const label = name === '' ? String(Object.keys(branch).length) : name;
      if (depth === names.length - 1) branch[label] = value;
      else {
        const next = branch[label];
        const made = isBranch(next) ? next : (Object.create(null) as { [name: string]: Tree });
        branch[label] = made;
        branch = made;
      }
    }
  }
  return root;
}

/** A stable text of the parameters, whatever order they came in: what an idempotency key is held against. */
export function fingerprint(tree: Tree): string {
  if (typeof tree === 'string') return JSON.stringify(tree);
  if (Array.isArray(tree)) return `[${tree.map(fingerprint).join(',')}]`;
  return `{${Object.keys(tree).sort().map((key) => `${JSON.stringify(key)}:${fingerprint(tree[key] ?? '')}`).join(',')}}`;
}

/**
 * Reads parameters one by one and remembers which were read, so that `finish` can refuse the others
 * with `parameter_unknown`. Every reader throws the provider's own 400.
 */
export class Params {
  private readonly read = new Set<string>();
  private readonly children: Params[] = [];

  constructor(
    private readonly tree: { [name: string]: Tree },
    private readonly prefix = '',
  ) {}

  /** The name in the provider's bracket notation. */
  label(name: string): string {
    return this.prefix === '' ? name : `${this.prefix}[${name}]`;
  }

  private take(name: string): Tree | undefined {
    this.read.add(name);
    return this.tree[name];
  }

  /** A string, or undefined when left out or empty. */
  text(name: string, longest = 5_000): string | undefined {
    const value = this.take(name);
    if (value === undefined || value === '') return undefined;
    if (typeof value !== 'string') throw invalid(`Invalid string: ${JSON.stringify(value)}`, undefined, this.label(name));
    if (value.length > longest) throw invalid(`Invalid string: must be at most ${longest} characters`, undefined, this.label(name));
    return value;
  }

  need(name: string, longest?: number): string {
    const value = this.text(name, longest);
    if (value === undefined) throw missing(this.label(name));
    return value;
  }

  oneOf<const T extends string>(name: string, allowed: readonly T[]): T | undefined {
    const value = this.text(name);
    if (value === undefined) return undefined;
    const found = allowed.find((each) => each === value);
    if (found === undefined) throw invalid(`Invalid ${this.label(name)}: must be one of ${allowed.join(', ')}`, undefined, this.label(name));
    return found;
  }

  integer(name: string): number | undefined {
    const value = this.text(name);
    if (value === undefined) return undefined;
    if (!/^-?\d{1,12}$/.test(value)) throw invalid(`Invalid integer: ${value}`, 'parameter_invalid_integer', this.label(name));
    return Number(value);
  }

  /** An amount of at least one cent, at most the provider's eight digits. */
  amount(name: string): number | undefined {
    const value = this.integer(name);
    if (value === undefined) return undefined;
    if (value < 1) throw invalid('Invalid positive integer', 'parameter_invalid_integer', this.label(name));
    if (value > 99_999_999) throw invalid('Amount must be no more than $999,999.99', 'amount_too_large', this.label(name));
    return value;
  }

  currency(name = 'currency'): 'usd' {
    const value = this.need(name).toLowerCase();
    if (value !== 'usd') throw invalid(`Invalid currency: ${value}. This account takes usd.`, undefined, this.label(name));
    return value;
  }

  flag(name: string): boolean | undefined {
    const value = this.text(name);
    if (value === undefined) return undefined;
    if (value !== 'true' && value !== 'false') throw invalid(`Invalid boolean: ${value}`, undefined, this.label(name));
    return value === 'true';
  }

  nested(name: string): Params | undefined {
    const value = this.take(name);
    if (value === undefined || value === '') return undefined;
    if (!isBranch(value)) throw invalid('Invalid object', undefined, this.label(name));
    const child = new Params(value, this.label(name));
    this.children.push(child);
    return child;
  }

  /** The members of a list of objects, in order. */
  members(name: string): Params[] {
    const list = this.nested(name);
    return list === undefined ? [] : list.keys().map((key) => list.nested(key)).filter((member) => member !== undefined);
  }

  /** The members of a list of strings, in order. */
  texts(name: string): string[] {
    const list = this.nested(name);
    return list === undefined ? [] : list.keys().map((key) => list.need(key));
  }

  /** A free branch that is accepted and not looked into. */
  anything(name: string): Tree | undefined {
    return this.take(name);
  }

  /** A change to metadata: the old entries with the new laid over; an empty value takes an entry away. */
  metadata(old: { readonly [name: string]: string } = {}): { [name: string]: string } {
    const raw = this.take('metadata');
    if (raw === undefined) return { ...old };
    if (raw === '') return {};
    if (!isBranch(raw)) throw invalid('Invalid object', undefined, this.label('metadata'));
    const merged: { [name: string]: string } = { ...old };
    for (const [key, value] of Object.entries(raw)) {
      if (typeof value !== 'string') throw invalid('Metadata values must be strings', undefined, this.label(`metadata[${key}]`));
      if (key.length > 40) throw invalid('Metadata keys must be at most 40 characters', undefined, this.label('metadata'));
      if (value.length > 500) throw invalid('Metadata values must be at most 500 characters', undefined, this.label(`metadata[${key}]`));
      if (value === '') delete merged[key];
      else merged[key] = value;
    }
    if (Object.keys(merged).length > 50) throw invalid('You can specify up to 50 metadata keys', undefined, this.label('metadata'));
    return merged;
  }

  keys(): string[] {
    return Object.keys(this.tree);
  }

  /** @throws the provider's `parameter_unknown` for anything nobody read. */
  finish(): void {
    const unknown = Object.keys(this.tree).filter((name) => !this.read.has(name));
    if (unknown[0] !== undefined) throw invalid(`Received unknown parameter: ${this.label(unknown[0])}`, 'parameter_unknown', this.label(unknown[0]));
    for (const child of this.children) child.finish();
  }
}
