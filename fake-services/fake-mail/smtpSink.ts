import type { AddressInfo } from 'node:net';
import { setTimeout as wait } from 'node:timers/promises';
import { SMTPServer } from 'smtp-server';
import type { SMTPServerAddress, SMTPServerDataStream, SMTPServerSession } from 'smtp-server';
import type { MailFault } from '#fakes/fake-mail/faults';
import type { MailStore } from '#fakes/fake-mail/mailStore';
import { drawFrom, seededChance } from '#fakes/lib/chance';
import type { FaultBook } from '#fakes/lib/faultBook';

type Answer = (error?: Error | null) => void;

const REFUSALS = {
  451: 'Temporarily not possible, try again later',
  550: 'No such mailbox here',
} as const;

/** An SMTP server that takes mail for anybody from anybody, unless a fault says otherwise. */
export class SmtpSink {
  #server: SMTPServer;
  #chance = seededChance(1);

  constructor(
    private readonly store: MailStore,
    private readonly faults: FaultBook<MailFault>,
  ) {
    this.#server = new SMTPServer({
      authOptional: true,
      disabledCommands: ['AUTH', 'STARTTLS'],
      disableReverseLookup: true,
      closeTimeout: 100,
      onRcptTo: (address, session, answer) => void this.#recipient(address, session, answer),
      onData: (stream, session, answer) => void this.#data(stream, session, answer),
    });
    // Connections that a fault drops end in an error here; the sender sees it, and nobody else needs to.
    this.#server.on('error', () => undefined);
  }

  async listen(port: number): Promise<number> {
    await new Promise<void>((resolve, reject) => {
      this.#server.server.once('error', reject);
      this.#server.listen(port, '127.0.0.1', () => resolve());
    });
    return (this.#server.server.address() as AddressInfo).port;
  }

  stop(): Promise<void> {
    return new Promise((resolve) => this.#server.close(() => resolve()));
  }

  async #recipient(
    { address }: SMTPServerAddress,
    session: SMTPServerSession,
    answer: Answer,
  ): Promise<void> {
    const slow = this.faults.strike(['slow'], [address]);
    if (slow) await wait(drawFrom(slow.ms, this.#chance));
    if (this.faults.strike(['drop'], [address])) return this.#drop(session);
    const refusal = this.faults.strike(['refuse'], [address]);
    answer(refusal ? refused(refusal.code ?? 550) : null);
  }

  async #data(stream: SMTPServerDataStream, session: SMTPServerSession, answer: Answer): Promise<void> {
    try {
      const chunks: Buffer[] = [];
      for await (const chunk of stream) chunks.push(chunk as Buffer);
      const to = session.envelope.rcptTo.map((recipient) => recipient.address);
      const { mailFrom } = session.envelope;
      await this.store.accept({ from: mailFrom ? mailFrom.address : '', to }, Buffer.concat(chunks));
      await this.#answerAccepted(to, session, answer);
    } catch (error) {
      answer(error instanceof Error ? error : new Error(String(error)));
    }
  }

  /** The mail is taken; whether the sender learns of it is another matter. */
  async #answerAccepted(to: string[], session: SMTPServerSession, answer: Answer): Promise<void> {
    const fault = this.faults.strike(['dropAfterAccept', 'hangAfterAccept'], to);
    if (fault?.kind === 'dropAfterAccept') return this.#drop(session);
    if (fault?.kind === 'hangAfterAccept') await wait(drawFrom(fault.ms, this.#chance));
    answer();
  }

  #drop(session: SMTPServerSession): void {
    for (const connection of this.#server.connections) {
      if (connection.id === session.id) connection._socket.destroy();
    }
  }
}

function refused(code: 451 | 550): Error {
  return Object.assign(new Error(REFUSALS[code]), { responseCode: code });
}
