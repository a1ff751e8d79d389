import type { Server as HttpServer } from 'node:http';
import { Server, type Socket } from 'socket.io';
import type { z } from 'zod';
import type { Database } from '@drizzle/client';
import {
  liveEvents,
  livePath,
  watchCourse,
  watchPile,
  watchProblem,
  type ClientEvents,
  type LiveEvent,
  type LiveEventName,
  type ServerEvents,
  type Watching,
} from '@shared/live';
import type { SignedIn } from '../access/policy';
import type { Config } from '../config';
import { isSameOrigin } from '../http/same-origin';
import { personRoom, roomOfCourse, roomOfProblem, seatAt } from './rooms';

/** Finds the person behind a `Cookie` header. */
export type Authenticate = (cookieHeader: string) => Promise<SignedIn | null>;

/** An open bench: one page of one person on one pile. */
export interface OpenBench {
  readonly pileId: string;
  readonly benchId: string;
  readonly membershipId: string;
}

/** How a bench was left: its page was closed or moved on, its person signed out, or its connection broke. */
export type Leaving = 'left' | 'signed out' | 'connection lost';

/** An event on its way out, as observers in this process see it. */
export interface Emitted {
  readonly rooms: readonly string[];
  readonly event: LiveEventName;
  readonly body: unknown;
}

/** The live connection: facts go out after commit; nothing depends on their arrival. */
export interface Live {
  /** Tells all in the rooms a fact. Call it after the transaction has been committed. */
  emit<Name extends LiveEventName>(rooms: readonly string[], event: Name, body: LiveEvent<Name>): void;
  /** Starts to take connections on a server. Without it, facts reach observers only. */
  attach(server: HttpServer, world: World, authenticate: Authenticate): void;
  /** Disconnects everything that was opened under these sessions. */
  endSessions(sessionIds: readonly string[]): void;
  /** The benches that are open in this process on a pile. */
  benchesOf(pileId: string): readonly OpenBench[];
  /** Calls back when a bench has been opened. */
  onBenchOpened(listener: (bench: OpenBench) => void): void;
  /** Calls back when a bench has been left. */
  onBenchLeft(listener: (bench: OpenBench, leaving: Leaving) => void): void;
  /** Calls back with every fact. */
  observe(listener: (emitted: Emitted) => void): void;
  close(): void;
}

/** What the connection needs of the server. */
interface World {
  readonly db: Database;
  readonly config: Pick<Config, 'origin' | 'checkResponses'>;
}

interface SocketData {
  person: SignedIn;
  benches: Map<string, OpenBench>;
  courses: Set<string>;
  problems: Set<string>;
  signedOut?: boolean;
}

type LiveSocket = Socket<ClientEvents, ServerEvents, Record<string, never>, SocketData>;

/** How often an open connection's session and rooms are looked at again, in milliseconds. */
const recheck = 60_000;

/** Most benches, courses and problems that one connection may watch, of each. */
const mostWatched = 8;

/** Makes the live connection. Until it is attached to a server, facts reach observers only, which serves tests. */
export function createLive(): Live {
  const observers: ((emitted: Emitted) => void)[] = [];
  const opened: ((bench: OpenBench) => void)[] = [];
  const left: ((bench: OpenBench, leaving: Leaving) => void)[] = [];
  let io: Server<ClientEvents, ServerEvents, Record<string, never>, SocketData> | undefined;
  let timer: NodeJS.Timeout | undefined;
  let check = true;

  function leave(socket: LiveSocket, bench: OpenBench, leaving: Leaving): void {
    if (!socket.data.benches.delete(bench.benchId)) return;
    for (const listener of left) listener(bench, leaving);
  }

  function leaveAll(socket: LiveSocket, leaving: Leaving): void {
    for (const bench of [...socket.data.benches.values()]) leave(socket, bench, leaving);
  }

  function connect(socket: LiveSocket, world: World, authenticate: Authenticate): void {
    socket.data.benches = new Map();
    socket.data.courses = new Set();
    socket.data.problems = new Set();
    void socket.join(personRoom(socket.data.person.id));
    const whoNow = () => authenticate(socket.handshake.headers.cookie ?? '');

    socket.on('watchPile', (wish, acknowledge) => {
      const asked = read(watchPile, wish);
      if (!asked) return;
      void whoNow().then((person) => {
        if (!socket.connected) return;
        const seat = person && seatAt(world.db, person, asked.pileId);
        if (!seat || socket.data.benches.size >= mostWatched) {
          answer(acknowledge, refusal);
          return;
        }
        const bench = { ...asked, membershipId: seat.membershipId };
        socket.data.benches.set(bench.benchId, bench);
        void socket.join(seat.room);
        answer(acknowledge, { ok: true });
        for (const listener of opened) listener(bench);
      }, disconnect);
    });
    socket.on('leavePile', (wish) => {
      const asked = read(watchPile, wish);
      const bench = asked && socket.data.benches.get(asked.benchId);
      if (!bench) return;
      const { pileId } = bench;
      if (![...socket.data.benches.values()].some((each) => each !== bench && each.pileId === pileId))
        leaveRooms(socket, `pile:${pileId}`);
      leave(socket, bench, 'left');
    });
    socket.on('watchCourse', (wish, acknowledge) => {
      const asked = read(watchCourse, wish);
      if (!asked) return;
      void whoNow().then((person) => {
        if (!socket.connected) return;
        const room = person && roomOfCourse(person, asked.courseId);
        if (!room || socket.data.courses.size >= mostWatched) {
          answer(acknowledge, refusal);
          return;
        }
        socket.data.courses.add(asked.courseId);
        void socket.join(room);
        answer(acknowledge, { ok: true });
      }, disconnect);
    });
    socket.on('leaveCourse', (wish) => {
      const asked = read(watchCourse, wish);
      if (!asked) return;
      socket.data.courses.delete(asked.courseId);
      leaveRooms(socket, `course:${asked.courseId}`);
    });
    socket.on('watchProblem', (wish, acknowledge) => {
      const asked = read(watchProblem, wish);
      if (!asked) return;
      void whoNow().then((person) => {
        if (!socket.connected) return;
        const room = person && roomOfProblem(world.db, person, asked.problemId);
        if (!room || socket.data.problems.size >= mostWatched) {
          answer(acknowledge, refusal);
          return;
        }
        socket.data.problems.add(asked.problemId);
        void socket.join(room);
        answer(acknowledge, { ok: true });
      }, disconnect);
    });
    socket.on('leaveProblem', (wish) => {
      const asked = read(watchProblem, wish);
      if (!asked) return;
      socket.data.problems.delete(asked.problemId);
      leaveRooms(socket, `problem:${asked.problemId}`);
    });
    socket.on('disconnect', (reason) => {
      // A page that is closed says so; all else may come back.
      const closed = reason === 'client namespace disconnect';
      leaveAll(socket, socket.data.signedOut ? 'signed out' : closed ? 'left' : 'connection lost');
    });

    /** Whoever does not keep to the agreed form is disconnected. */
    function read<S extends z.ZodType>(schema: S, value: unknown): z.output<S> | null {
      const result = schema.safeParse(value);
      if (!result.success) disconnect();
      return result.success ? result.data : null;
    }
    function disconnect(): void {
      socket.disconnect(true);
    }
  }

  /** Sessions end and memberships are taken away while connections stay open. */
  async function recheckAll(world: World, authenticate: Authenticate): Promise<void> {
    for (const socket of io?.sockets.sockets.values() ?? []) {
      const person = await authenticate(socket.handshake.headers.cookie ?? '');
      const piles = [...socket.data.benches.values()].map((bench) => bench.pileId);
      const still =
        person !== null &&
        piles.every((pileId) => isIn(socket, seatAt(world.db, person, pileId)?.room)) &&
        [...socket.data.courses].every((courseId) => isIn(socket, roomOfCourse(person, courseId))) &&
        [...socket.data.problems].every((problemId) => isIn(socket, roomOfProblem(world.db, person, problemId)));
      if (!still) end(socket);
    }
  }

  return {
    emit(rooms, event, body) {
      const sent = check ? (liveEvents[event].parse(body) as typeof body) : body;
      // The typed emitter cannot see that name and body belong together.
      if (io && rooms.length > 0) (io.to([...rooms]).emit as (name: string, body: unknown) => void)(event, sent);
      for (const observer of observers) observer({ rooms, event, body: sent });
    },
    attach(server, world, authenticate) {
      check = world.config.checkResponses;
      io = new Server(server, {
        path: livePath,
        serveClient: false,
        maxHttpBufferSize: 10_000,
        pingInterval: 10_000,
        pingTimeout: 10_000,
        allowRequest: (request, decide) => {
          decide(null, isSameOrigin(request, world.config.origin));
        },
      });
      io.use((socket, next) => {
        authenticate(socket.handshake.headers.cookie ?? '').then(
          (person) => {
            if (person) socket.data.person = person;
            next(person ? undefined : new Error('not signed in'));
          },
          () => {
            next(new Error('unexpected'));
          },
        );
      });
      io.on('connection', (socket) => {
        connect(socket, world, authenticate);
      });
      timer = setInterval(() => void recheckAll(world, authenticate), recheck);
      timer.unref();
    },
    endSessions(sessionIds) {
      const ended = new Set(sessionIds);
      for (const socket of io?.sockets.sockets.values() ?? []) if (ended.has(socket.data.person.sessionId)) end(socket);
    },
    benchesOf: (pileId) =>
      [...(io?.sockets.sockets.values() ?? [])]
        .flatMap((socket) => [...socket.data.benches.values()])
        .filter((bench) => bench.pileId === pileId),
    onBenchOpened: (listener) => {
      opened.push(listener);
    },
    onBenchLeft: (listener) => {
      left.push(listener);
    },
    observe: (listener) => {
      observers.push(listener);
    },
    close() {
      clearInterval(timer);
      left.length = 0;
      void io?.close();
    },
  };
}

const refusal: Watching = { ok: false, detail: 'There is no such place, or it is not yours to see.' };

function end(socket: LiveSocket): void {
  socket.data.signedOut = true;
  socket.disconnect(true);
}

/** A page may have been written by anybody: the acknowledgement need not be a function. */
function answer(acknowledge: unknown, watching: Watching): void {
  if (typeof acknowledge === 'function') (acknowledge as (watching: Watching) => void)(watching);
}

function isIn(socket: LiveSocket, room: string | null | undefined): boolean {
  return typeof room === 'string' && socket.rooms.has(room);
}

function leaveRooms(socket: LiveSocket, prefix: string): void {
  for (const room of socket.rooms) if (room.startsWith(prefix)) void socket.leave(room);
}
