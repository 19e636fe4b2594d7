type Task = () => void | Promise<void>;

/**
 * Runs tasks one after the other. A task that is done at once costs nothing; behind one that returns a promise all others
 * wait. After one has failed, none runs any more.
 */
export class SerialTasks {
  private waiting: Task[] = [];
  private running = false;
  private isStopped = false;

  constructor(private readonly onError: (error: unknown) => void) {}

  get isBusy(): boolean {
    return this.running;
  }

  run(task: Task): void {
    if (this.isStopped) return;
    if (this.running) {
      this.waiting.push(task);
      return;
    }
    this.start(task);
  }

  stop(): void {
    this.isStopped = true;
    this.waiting = [];
  }

  private start(task: Task): void {
    let outcome: void | Promise<void>;
    this.running = true;
    try {
      outcome = task();
    } catch (error) {
      this.end(error);
      return;
    }
    if (outcome === undefined) {
      this.running = false;
      return;
    }
    outcome.then(
      () => {
        this.running = false;
        this.next();
      },
      (error: unknown) => {
        this.end(error);
      },
    );
  }

  private next(): void {
    while (!this.running && !this.isStopped) {
      const task = this.waiting.shift();
      if (task === undefined) return;
      this.start(task);
    }
  }

  private end(error: unknown): void {
    this.running = false;
    this.stop();
    this.onError(error);
  }
}
