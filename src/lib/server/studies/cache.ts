/**
 * A small memory of results by key, least recently used first out. Results are pure functions of their key, so nothing
 * here ever goes out of date; the size is all there is to bound.
 */
export class ResultCache<T> {
  private readonly held = new Map<string, T>();

  constructor(private readonly size: number) {}

  /**
   * The value for the key, computed on first use. A computation that throws is not kept, nor is one of which `keep` says
   * that another day's answer may be better, such as one that ran out of time.
   */
  get(key: string, compute: () => T, keep: (value: T) => boolean = () => true): T {
    const found = this.held.get(key);
    if (found !== undefined) {
      this.held.delete(key);
      this.held.set(key, found);
      return found;
    }
    const value = compute();
    if (!keep(value)) return value;
    this.held.set(key, value);
    if (this.held.size > this.size) {
      const oldest = this.held.keys().next();
      if (!oldest.done) this.held.delete(oldest.value);
    }
    return value;
  }
}
