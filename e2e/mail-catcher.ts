import { simpleParser, type ParsedMail } from 'mailparser';
import { SMTPServer } from 'smtp-server';

/** A mail server on the loopback that keeps every letter. */
export class MailCatcher {
  private readonly letters: ParsedMail[] = [];
  private readonly server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    onData: (stream, _session, done) => {
      void simpleParser(stream).then((letter) => {
        this.letters.push(letter);
        done();
      }, done);
    },
  });

  /** @returns its address, as `SMTP_URL` takes it */
  async start(): Promise<string> {
    await new Promise<void>((resolve) => this.server.listen(0, '127.0.0.1', resolve));
    const address = this.server.server.address();
    if (!address || typeof address !== 'object') throw new Error('The mail server listens nowhere.');
    return `smtp://127.0.0.1:${String(address.port)}`;
  }

  /** The latest letter to an address, or undefined. */
  latestTo(email: string): ParsedMail | undefined {
    return this.letters.findLast(({ to }) => [to].flat().some((each) => each?.text.includes(email)));
  }

  async stop(): Promise<void> {
    await new Promise<void>((resolve) => {
      this.server.close(resolve);
    });
  }
}
