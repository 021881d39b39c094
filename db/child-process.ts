// Starts programs that end when this process ends, however it ends.
import { spawn, type ChildProcess, type StdioOptions } from "node:child_process";

/**
 * Replaces itself with the program given as arguments, after leaving a guard behind: a subshell that reads a pipe from the
 * starting process. A line means the program has ended by itself; end of file means the starter is gone, and the guard
 * ends the whole process group. The group's number cannot be given to a stranger meanwhile: the guard is one of the group.
 */
const launcher = `
exec 9<&0 </dev/null
(
  read -r line <&9 && exit 0
  trap '' TERM
  kill -s TERM -- "-$$"
  checks=0
  while kill -0 "$$" && [ "$checks" -lt 50 ]; do sleep 0.2; checks=$((checks + 1)); done
  kill -s KILL -- "-$$"
) >/dev/null 2>&1 &
exec 9<&-
exec "$@"
`;

export interface ChildOptions {
  cwd?: string;
  env?: NodeJS.ProcessEnv;
  /** Where standard output and standard error go. @default both "inherit" */
  output?: [stdout: "inherit" | "pipe" | "ignore" | number, stderr: "inherit" | "pipe" | "ignore" | number];
}

export interface Child {
  process: ChildProcess;
  pid: number;
  hasExited(): boolean;
  /** Settles when the program has ended; never rejects. */
  exited: Promise<ChildExit>;
  /** SIGTERM to the program, SIGKILL to its whole group when `graceMs` have passed; settles when it has ended. */
  stop(graceMs: number): Promise<ChildExit>;
}

export interface ChildExit {
  code: number | null;
  signal: NodeJS.Signals | null;
}

/**
 * Starts a program in a process group of its own, so that Ctrl-C reaches only the starter, which ends its children in order.
 *
 * @throws Error if no process could be made; a program that is not found ends with code 127
 */
export function startChild(command: string, parameters: string[], options: ChildOptions = {}): Child {
  const [stdout, stderr] = options.output ?? ["inherit", "inherit"];
  const stdio: StdioOptions = ["pipe", stdout, stderr];
  const child = spawn("/bin/sh", ["-c", launcher, "sh", command, ...parameters], {
    cwd: options.cwd,
    env: options.env ?? process.env,
    stdio,
    detached: true,
  });
  const pid = child.pid;
  if (pid === undefined) throw new Error(`${command} could not be started`);
  child.stdin?.on("error", () => undefined); // the guard may be gone already when it is told to go
  const exited = new Promise<ChildExit>((resolve) => {
    child.once("exit", (code, signal) => {
      child.stdin?.end("done\n");
      resolve({ code, signal });
    });
  });
  return {
    process: child,
    pid,
    hasExited: () => hasExited(child),
    exited,
    stop: (graceMs) => stopChild(child, pid, exited, graceMs),
  };
}

function hasExited({ exitCode, signalCode }: ChildProcess): boolean {
  return exitCode !== null || signalCode !== null;
}

async function stopChild(
  child: ChildProcess,
  pid: number,
  exited: Promise<ChildExit>,
  graceMs: number,
): Promise<ChildExit> {
  if (!hasExited(child)) child.kill("SIGTERM");
  const timer = setTimeout(() => killGroup(pid), graceMs);
  const exit = await exited;
  clearTimeout(timer);
  return exit;
}

function killGroup(leaderPid: number): void {
  try {
    process.kill(-leaderPid, "SIGKILL");
  } catch {
    // The group has ended meanwhile.
  }
}
