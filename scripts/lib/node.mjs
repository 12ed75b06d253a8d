import { Failure } from './failure.mjs';

/** Says in one sentence why a Node.js version does not do, or nothing when it does. */
export function nodeComplaint(version) {
  const [major, minor] = version.split('.').map(Number);
  if (major === 20 && minor >= 19) return undefined;
  return `Benchbell runs on Node.js 20 (20.19 or newer), this is ${version}: please install Node.js 20 and try again.`;
}

/** Refuses a Node.js that the packages do not support, before anything is installed with it. */
export function requireNode(version = process.versions.node) {
  const complaint = nodeComplaint(version);
  if (complaint) throw new Failure(complaint);
}
