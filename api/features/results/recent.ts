/** The answers given last, so many of them; whoever is asked for again stays longest. */
export class Recent<Value> {
  private readonly values = new Map<string, Value>();

  constructor(private readonly most: number) {}

  get(key: string): Value | undefined {
    const value = this.values.get(key);
    if (value !== undefined) {
      this.values.delete(key);
      this.values.set(key, value);
    }
    return value;
  }

  set(key: string, value: Value): void {
    this.values.delete(key);
    this.values.set(key, value);
    const [oldest] = this.values.keys();
    if (this.values.size > this.most && oldest !== undefined) this.values.delete(oldest);
  }
}
