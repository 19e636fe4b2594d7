/**
 * A mail server that sends nothing on: it keeps what it gets in memory, for development and tests.
 *
 *   node scripts/mailbox.mjs
 *
 * MAILBOX_SMTP_PORT takes mail; MAILBOX_HTTP_PORT answers, on loopback only:
 *   GET    /mails   the mails, newest first, as JSON [{ id, at, from, to: [address], subject, text }]
 *   DELETE /mails   forgets them
 */
import { createServer } from "node:http";
import { simpleParser } from "mailparser";
import { SMTPServer } from "smtp-server";

const smtpPort = Number(process.env.MAILBOX_SMTP_PORT ?? 0);
const httpPort = Number(process.env.MAILBOX_HTTP_PORT ?? 0);
const KEPT = 500;
let mails = [];
let count = 0;

const smtp = new SMTPServer({
  authOptional: true,
  disabledCommands: ["STARTTLS"],
  size: 1024 * 1024,
  onData: (stream, session, done) => {
    simpleParser(stream).then((mail) => {
      const to = session.envelope.rcptTo.map((recipient) => recipient.address);
      mails = [
        { id: String(++count), at: new Date().toISOString(), from: mail.from?.text ?? "", to, subject: mail.subject ?? "", text: mail.text ?? "" },
        ...mails,
      ].slice(0, KEPT);
      done();
    }, done);
  },
});
smtp.on("error", (error) => console.error(`[mailbox] ${error.message}`));

const http = createServer((request, response) => {
  if (request.url !== "/mails") return void response.writeHead(404).end();
  if (request.method === "DELETE") mails = [];
  response.writeHead(200, { "content-type": "application/json; charset=utf-8", "cache-control": "no-store" }).end(JSON.stringify(mails));
});

smtp.listen(smtpPort, "127.0.0.1", () => {
  http.listen(httpPort, "127.0.0.1", () => {
    console.log(`[mailbox] mail on 127.0.0.1:${smtp.server.address().port}, read it on 127.0.0.1:${http.address().port}`);
  });
});

const stop = () => {
  http.close();
  smtp.close(() => process.exit(0));
};
process.on("SIGTERM", stop);
process.on("SIGINT", stop);
