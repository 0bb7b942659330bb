/** Child processes that live and end with this one, and come back when they die. */
import { spawn } from 'node:child_process';
import { ROOT } from './postgres.mjs';

const PATIENCE_MS = 20_000;
const QUICK_DEATH_MS = 3_000;
const QUICK_DEATHS = 5;

/** Programs that don't watch their parent themselves are ended with it. */
const LEAVE_WITH_PARENT = 'data:text/javascript,process.on("disconnect",()=>process.exit())';

export class Family {
  #members = [];
  #stopping = false;
  #onGiveUp;

  /** @param {(name: string) => void} onGiveUp called when a child can't be kept alive */
  constructor(onGiveUp) {
    this.#onGiveUp = onGiveUp;
  }

  /** @param {{ name: string, args: string[], env: object, watchesParent?: boolean }} member */
  add({ name, args, env, watchesParent = false }) {
    const member = { name, args, env, watchesParent, child: null, quickDeaths: 0 };
    this.#members.push(member);
    this.#spawn(member);
  }

  /** Runs something to its end, once; it is ended with the others. */
  addOnce({ args, env, onDone }) {
    const member = { child: null };
    this.#members.push(member);
    member.child = spawn(process.execPath, ['--import', LEAVE_WITH_PARENT, ...args], {
      cwd: ROOT,
      env: { ...process.env, ...env },
      stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
      detached: true,
    });
    member.child.once('exit', (code) => {
      member.child = null;
      if (!this.#stopping) onDone(code);
    });
  }

  /** Ends members so that they come back with what has changed. */
  restart(names) {
    for (const { name, child } of this.#members) if (names.includes(name)) child?.kill('SIGTERM');
  }

  async stop() {
    this.#stopping = true;
    await Promise.all(this.#members.map((member) => this.#end(member)));
  }

  #spawn(member) {
    const { name, args, env, watchesParent } = member;
    const startedAt = Date.now();
    const preload = watchesParent ? [] : ['--import', LEAVE_WITH_PARENT];
    // A group of its own: Ctrl-C reaches this process only, which then ends the others in order.
    member.child = spawn(process.execPath, [...preload, ...args], {
      cwd: ROOT,
      env: { ...process.env, ...env },
      stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
      detached: true,
    });
    member.child.once('exit', (code, signal) => {
      member.child = null;
      if (this.#stopping) return;
      const isQuick = Date.now() - startedAt < QUICK_DEATH_MS;
      member.quickDeaths = isQuick ? member.quickDeaths + 1 : 0;
      if (member.quickDeaths >= QUICK_DEATHS) {
        this.#onGiveUp(name);
        return;
      }
      if (signal !== 'SIGTERM' && code !== 0)
        console.log(`The ${name} ended (${signal ?? `code ${code}`}); starting it again.`);
      setTimeout(() => !this.#stopping && this.#spawn(member), isQuick ? 500 * member.quickDeaths : 100);
    });
  }

  #end({ child }) {
    if (!child || child.exitCode !== null) return Promise.resolve();
    return new Promise((resolve) => {
      const last = setTimeout(() => child.kill('SIGKILL'), PATIENCE_MS);
      child.once('exit', () => {
        clearTimeout(last);
        resolve();
      });
      child.kill('SIGTERM');
    });
  }
}
