import { expect, type BrowserContext, type Request, type Response } from '@playwright/test';
import { mail, sms, web } from './addresses';

const FAKES: readonly string[] = [sms, mail];
/** The browser's own note on a refused answer; the answer itself is looked at in `onResponse`. */
const ECHO = 'Failed to load resource';
/** A page that is left lets go of what it was still reading. */
const LET_GO = 'net::ERR_ABORTED';

/**
 * Collects whatever a page should never do: reports of the content policy, errors on the console, requests to other
 * hosts, requests that fail and answers that refuse. A test names the refusals that belong to its story, and each of
 * those must then really come.
 */
export class Watch {
  private readonly problems: string[] = [];
  private readonly allowed: { what: RegExp; seen: boolean }[] = [];

  /** Watches every page of a browser context, from its first request on. */
  async over(context: BrowserContext): Promise<void> {
    await context.exposeFunction('tellPolicyViolation', (what: string) => this.note(`policy: ${what}`));
    await context.addInitScript(() => {
      const tell = Reflect.get(window, 'tellPolicyViolation') as (what: string) => void;
      document.addEventListener('securitypolicyviolation', (event) => {
        tell(`${event.effectiveDirective} ${event.blockedURI} ${event.sourceFile}:${event.lineNumber}`);
      });
    });
    context.on('weberror', (error) => this.note(`thrown: ${error.error().message}`));
    context.on('console', (message) => {
      if (message.type() !== 'error' && message.type() !== 'warning') return;
      // The stand-ins' pages are no part of the product.
      const isOurs = message.page()?.url().startsWith(web) ?? true;
      if (isOurs && !message.text().startsWith(ECHO)) this.note(`console: ${message.text()}`);
    });
    context.on('request', (request) => this.onRequest(request));
    context.on('requestfailed', (request) => this.onFailure(request));
    context.on('response', (response) => this.onResponse(response));
  }

  /** A refusal that belongs to the story. */
  allow(what: RegExp): void {
    this.allowed.push({ what, seen: false });
  }

  /** Fails when anything was noted, or when an allowed refusal never came. */
  finish(): void {
    expect(this.problems, 'what the pages did that they should not').toEqual([]);
    const unseen = this.allowed.filter(({ seen }) => !seen).map(({ what }) => String(what));
    expect(unseen, 'refusals that were expected and never came').toEqual([]);
  }

  private note(problem: string): void {
    const match = this.allowed.find(({ what }) => what.test(problem));
    if (match) match.seen = true;
    else this.problems.push(problem);
  }

  private onRequest(request: Request): void {
    const { origin, protocol } = new URL(request.url());
    if (protocol === 'data:' || protocol === 'blob:' || origin === web) return;
    const isOwn = request.isNavigationRequest() || new URL(request.frame().url()).origin === origin;
    if (!(FAKES.includes(origin) && isOwn)) this.note(`other host: ${request.url()}`);
  }

  private onFailure(request: Request): void {
    const why = request.failure()?.errorText ?? 'failed';
    if (why !== LET_GO) this.note(`${why} ${request.method()} ${pathOf(request.url())}`);
  }

  private onResponse(response: Response): void {
    if (response.status() < 400) return;
    this.note(`${response.status()} ${response.request().method()} ${pathOf(response.url())}`);
  }
}

const pathOf = (url: string): string => new URL(url).pathname;
