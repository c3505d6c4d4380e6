/** When an answer is worth keeping, and how much is kept. */
export interface Keeping {
  /** Kept when it took this long or longer, ms. */
  readonly costlyMs: number;
  /** For so long, ms. */
  readonly forMs: number;
  /** As many answers as are kept; the one asked for longest ago gives way. */
  readonly most: number;
}

/**
 * Answers that took long to work out, kept a while in this process, each worked out once however many ask for it at the same time.
 * What is cheap is never kept, so it is never old.
 */
export class KeptAnswers<Answer> {
  readonly #kept = new Map<string, { readonly until: number; readonly answer: Answer }>();
  readonly #coming = new Map<string, Promise<Answer>>();

  constructor(readonly keeping: Keeping) {}

  /** Whether asking costs nothing now. */
  has(key: string): boolean {
    return this.#coming.has(key) || (this.#kept.get(key)?.until ?? 0) > performance.now();
  }

  /** The answer that is kept or on its way, or what `workOut` gives. */
  get(key: string, workOut: () => Promise<Answer>): Promise<Answer> {
    const known = this.#kept.get(key);
    if (known && known.until > performance.now()) {
      // Put last again: the first of the map is the one asked for longest ago.
      this.#kept.delete(key);
      this.#kept.set(key, known);
      return Promise.resolve(known.answer);
    }
    const coming = this.#coming.get(key) ?? this.#workOut(key, workOut);
    this.#coming.set(key, coming);
    return coming;
  }

  async #workOut(key: string, workOut: () => Promise<Answer>): Promise<Answer> {
    const began = performance.now();
    try {
      const answer = await workOut();
      const now = performance.now();
      this.#kept.delete(key);
      if (now - began >= this.keeping.costlyMs) this.#kept.set(key, { until: now + this.keeping.forMs, answer });
      for (const oldest of this.#kept.keys()) {
        if (this.#kept.size <= this.keeping.most) break;
        this.#kept.delete(oldest);
      }
      return answer;
    } finally {
      this.#coming.delete(key);
    }
  }
}
