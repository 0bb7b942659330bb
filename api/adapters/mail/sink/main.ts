import { SMTPServer } from 'smtp-server';
import { keepLetter, readLetter } from './letters.ts';

/** Local stand-in for a mail provider: takes every letter, sends none, keeps them for /dev/mail. */
const folder = process.env.MAIL_SINK_FOLDER;
const port = Number(process.env.MAIL_SINK_PORT);
if (!folder || !Number.isInteger(port)) throw new Error('The mail sink needs MAIL_SINK_FOLDER and MAIL_SINK_PORT');

const server = new SMTPServer({
  disabledCommands: ['AUTH', 'STARTTLS'],
  logger: false,
  onData(stream, { envelope }, done) {
    const pieces: Buffer[] = [];
    stream.on('data', (piece: Buffer) => pieces.push(piece));
    stream.on('end', () => {
      const from = envelope.mailFrom ? envelope.mailFrom.address : '';
      const to = envelope.rcptTo.map(({ address }) => address);
      keepLetter(folder, readLetter(Buffer.concat(pieces).toString('utf8'), new Date(), from, to)).then(
        () => done(),
        (error: unknown) => done(error instanceof Error ? error : new Error(String(error))),
      );
    });
  },
});
server.on('error', (error) => {
  console.error(`The mail sink can’t run: ${error.message}`);
  process.exit(1);
});
server.listen(port, '127.0.0.1');

const stop = () => server.close(() => process.exit(0));
process.on('SIGTERM', stop);
process.on('SIGINT', stop);
// The parent is gone, however it went.
process.on('disconnect', () => process.exit(0));
