/** When an answer is worth keeping, and how much is kept. */
export interface Keeping {
  /** Kept when it took this long or longer, ms. */
  readonly costlyMs: number;
  /** Good as new for so long, ms. */
  readonly freshMs: number;
  /** After that, still given for so long while it is worked out anew, ms. */
  readonly staleMs: number;
  /** As many answers as are kept; the one asked for longest ago gives way. */
  readonly most: number;
}

interface Kept<Answer> {
  readonly since: number;
  readonly answer: Answer;
}

/**
 * Answers that took long to work out, kept a while in this process, each worked out once however many ask for it at the same time.
 * What is cheap is never kept, so it is never old.
 */
export class KeptAnswers<Answer> {
  readonly #kept = new Map<string, Kept<Answer>>();
  readonly #coming = new Map<string, Promise<Answer>>();

  /** @param clock milliseconds that only go forward */
  constructor(
    readonly keeping: Keeping,
    readonly clock: () => number = () => performance.now(),
  ) {}

  /** Whether asking costs nothing now. */
  has(key: string): boolean {
    return this.#coming.has(key) || this.#age(key) < this.keeping.freshMs;
  }

  /** The answer that is kept or on its way, or what `workOut` gives. */
  get(key: string, workOut: () => Promise<Answer>): Promise<Answer> {
    const age = this.#age(key);
    const known = this.#kept.get(key);
    if (known && age < this.keeping.freshMs + this.keeping.staleMs) {
      // Put last again: the first of the map is the one asked for longest ago.
      this.#kept.delete(key);
      this.#kept.set(key, known);
      // Whoever asks next has the new one, or hears why there is none.
      if (age >= this.keeping.freshMs) this.#comingOne(key, workOut).catch(() => undefined);
      return Promise.resolve(known.answer);
    }
    return this.#comingOne(key, workOut);
  }

  #age(key: string): number {
    const known = this.#kept.get(key);
    return known ? this.clock() - known.since : Infinity;
  }

  #comingOne(key: string, workOut: () => Promise<Answer>): Promise<Answer> {
    const coming = this.#coming.get(key) ?? this.#workOut(key, workOut).finally(() => this.#coming.delete(key));
    this.#coming.set(key, coming);
    return coming;
  }

  async #workOut(key: string, workOut: () => Promise<Answer>): Promise<Answer> {
    const began = this.clock();
    const answer = await workOut();
    const now = this.clock();
    this.#kept.delete(key);
    if (now - began >= this.keeping.costlyMs) this.#kept.set(key, { since: now, answer });
    for (const oldest of this.#kept.keys()) {
      if (this.#kept.size <= this.keeping.most) break;
      this.#kept.delete(oldest);
    }
    return answer;
  }
}
