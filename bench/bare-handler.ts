// What a save is measured against: an Express handler that inserts one row, as durably as we do.
import Database from 'better-sqlite3';
import express from 'express';

const [, , file = ':memory:', port = '0'] = process.argv;
const database = new Database(file);
database.pragma('journal_mode = WAL');
database.pragma('synchronous = FULL');
database.exec(
  'create table saves (id integer primary key, answer text not null, body text not null, at integer not null)',
);
const insert = database.prepare('insert into saves (answer, body, at) values (?, ?, ?)');

const app = express();
app.use(express.json());
app.put('/answers/:answerId/text', (request, response) => {
  const { text } = request.body as { text: string };
  insert.run(request.params.answerId, text, Date.now());
  response.json({ answer: text });
});
const server = app.listen(Number(port), '127.0.0.1', () => {
  console.log('ready');
});
process.on('SIGTERM', () => {
  server.close();
  server.closeAllConnections();
  database.close();
});
