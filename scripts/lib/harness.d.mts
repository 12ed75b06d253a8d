/** The environment of a child process. */
export type Environment = Record<string, string | undefined>;

/** One process of the stack; `pid` changes with a restart. */
export interface StackChild {
  readonly name: string;
  readonly pid: number;
  readonly logFile: string;
  /** Settles with the exit code or signal of the present process. */
  readonly exited: Promise<number | string | null>;
  /** Signals the process's group and waits until it has ended; default SIGKILL. */
  kill(signal?: NodeJS.Signals): Promise<number | string | null>;
  /** Asks the process to end and insists after `graceMs` (default 10,000). */
  stop(graceMs?: number): Promise<void>;
  /** Kills the process if it lives and starts it again; settles when it is ready. */
  restart(): Promise<unknown>;
}

export interface StackAddresses {
  web: string;
  sms: string;
  mail: string;
  smtp: string;
  clock: string;
}

export interface StackPorts {
  web: number;
  sms: number;
  mail: number;
  smtp: number;
  clock: number;
}

export interface StackPlan {
  ports: StackPorts;
  addresses: StackAddresses;
  env: Environment;
}

export interface StackOptions {
  databaseUrl: string;
  /** Where the logs go, and the fakes' state unless `stateDir` says otherwise. */
  logDir: string;
  stateDir?: string;
  /** Free ports are chosen when left out. */
  ports?: StackPorts;
  /** What the processes inherit; default process.env. */
  env?: Environment;
  /** Variables that win over all others. */
  extra?: Environment;
  /** Variables of the web servers alone. */
  extraWeb?: Environment;
  /** Default 'test'. */
  nodeEnv?: string;
  /** How many servers and workers; default 1 each. Servers after the first get free ports. */
  webs?: number;
  workers?: number;
  /** The fakes' time at the start, HH:mm. */
  at?: string;
  /** Runs after the fakes serve and before the servers start. */
  beforeServers?(plan: StackPlan): Promise<void>;
  /** Sees what belongs on screen: errors and what is no log line. */
  onLine?(name: string, line: string): void;
}

export interface Stack extends StackPlan {
  fakes: StackChild;
  webs: (StackChild & { said: string })[];
  workers: StackChild[];
  children: StackChild[];
  stop(): Promise<void>;
}

export interface SpawnOptions {
  env: Environment;
  logDir: string;
  name?: string;
  onLine?(name: string, line: string): void;
}

/** Where a run of tests makes its databases. Plain data. */
export interface TestServer {
  adminUrl: string;
  login: string;
  loginUrl: string;
  run: { pid: number; startTime: string };
}

export interface TestDatabase {
  name: string;
  /** The login's address; connect with `options=-c role=…`. */
  url: string;
  appRole: string;
  ownerRole: string;
  drop(): Promise<void>;
}

export const root: string;
export const appRole: string;
export const ownerRole: string;
export function prepareCheckout(): Promise<void>;
export function ensureClientBuilt(): Promise<void>;
export function releaseCluster(): Promise<boolean>;
export function testPorts(): Promise<StackPorts>;
export function migrate(env: Environment): Promise<string>;
export function seedDemo(env: Environment): Promise<{
  shops: { name: string; slug: string }[];
  signIns: { role: string; where: string; how: string }[];
}>;
export function planStack(options: Omit<StackOptions, 'logDir'>): Promise<StackPlan>;
export function startStack(options: StackOptions): Promise<Stack>;
/** `said` is the address the server listens on. */
export function spawnWeb(options: SpawnOptions): Promise<StackChild & { said: string }>;
export function spawnWorker(options: SpawnOptions): Promise<StackChild>;
export function spawnFakes(options: SpawnOptions): Promise<StackChild & { said: StackAddresses }>;
export function openTestServer(): Promise<TestServer>;
export function newTestDatabase(server: TestServer, options?: { template?: string }): Promise<TestDatabase>;
export function markAsTemplate(server: TestServer, name: string): Promise<void>;
