// A value that tells those who watch it when it changes.

export class Cell<T> {
  private readonly watchers: ((value: T) => void)[] = [];

  constructor(private value: T) {}

  get(): T {
    return this.value;
  }

  set(value: T): void {
    if (Object.is(value, this.value)) return;
    this.value = value;
    for (const watcher of this.watchers) watcher(value);
  }

  /** Calls now and at every change. */
  watch(watcher: (value: T) => void): void {
    this.watchers.push(watcher);
    watcher(this.value);
  }
}
