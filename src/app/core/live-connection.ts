import { Injectable, signal } from '@angular/core';
import { Subject, filter, map, type Observable } from 'rxjs';
import type { Socket } from 'socket.io-client';
import {
  liveEvents,
  livePath,
  type ClientEvents,
  type LiveEvent,
  type LiveEventName,
  type ServerEvents,
  type Watching,
} from '@shared/live';

type LiveSocket = Socket<ServerEvents, ClientEvents>;

/** A fact as it came. */
export type Fact = { [Name in LiveEventName]: { readonly name: Name; readonly body: LiveEvent<Name> } }[LiveEventName];

/** Something that is watched: how to begin on a connection, and how to end. */
interface Watch {
  readonly begin: (socket: LiveSocket) => void;
  readonly end: (socket: LiveSocket) => void;
}

/** How long to wait before an answer from a connection that the server closed, in milliseconds. */
const patience = 5_000;

/**
 * The one connection over which the server tells what has happened. It exists while something is watched, and loads its
 * library only then. Nothing may depend on a fact's arrival: whoever sees a gap, or `rejoined`, fetches again.
 */
@Injectable({ providedIn: 'root' })
export class LiveConnection {
  private readonly facts = new Subject<Fact>();
  private readonly rejoins = new Subject<void>();
  private readonly watches = new Set<Watch>();
  private readonly live = signal(false);
  private readonly lostAt = signal<number | null>(null);
  private socket: LiveSocket | null = null;
  private opening: Promise<void> | null = null;

  /** Whether facts arrive now. */
  readonly isLive = this.live.asReadonly();
  /** Since when they do not, in UTC milliseconds; null while they do, or nothing was watched yet. */
  readonly notLiveSince = this.lostAt.asReadonly();
  /** The connection came back: what was seen may be out of date. */
  readonly rejoined: Observable<void> = this.rejoins.asObservable();
  /** Everything that the server tells. */
  readonly all: Observable<Fact> = this.facts.asObservable();

  /** The facts of one name. */
  of<Name extends LiveEventName>(name: Name): Observable<LiveEvent<Name>> {
    return this.facts.pipe(
      filter((fact): fact is Extract<Fact, { name: Name }> => fact.name === name),
      map((fact) => fact.body as LiveEvent<Name>),
    );
  }

  /**
   * Watches a pile from a bench.
   *
   * @param joined called whenever the server has let the bench in, the first time and after every break
   * @returns leaves the bench
   */
  watchPile(pileId: string, benchId: string, joined: () => void = () => undefined): () => void {
    return this.watch({
      begin: (socket) => {
        socket.emit('watchPile', { pileId, benchId }, (watching) => {
          this.settle(watching, joined);
        });
      },
      end: (socket) => {
        socket.emit('leavePile', { pileId, benchId });
      },
    });
  }

  /** Watches the news of a course. @returns ends it */
  watchCourse(courseId: string, joined: () => void = () => undefined): () => void {
    return this.watch({
      begin: (socket) => {
        socket.emit('watchCourse', { courseId }, (watching) => {
          this.settle(watching, joined);
        });
      },
      end: (socket) => {
        socket.emit('leaveCourse', { courseId });
      },
    });
  }

  /** Watches what colleagues say about a problem. @returns ends it */
  watchProblem(problemId: string, joined: () => void = () => undefined): () => void {
    return this.watch({
      begin: (socket) => {
        socket.emit('watchProblem', { problemId }, (watching) => {
          this.settle(watching, joined);
        });
      },
      end: (socket) => {
        socket.emit('leaveProblem', { problemId });
      },
    });
  }

  private watch(watch: Watch): () => void {
    this.watches.add(watch);
    if (this.socket?.connected) watch.begin(this.socket);
    else void this.open();
    return () => {
      if (!this.watches.delete(watch)) return;
      if (this.socket?.connected) watch.end(this.socket);
      if (this.watches.size === 0) this.close();
    };
  }

  private settle(watching: Watching, joined: () => void): void {
    if (!watching.ok) return;
    this.live.set(true);
    this.lostAt.set(null);
    joined();
  }

  private open(): Promise<void> {
    this.opening ??= this.connect().catch(() => {
      // The library could not be fetched: offline. The next watch tries again.
      this.opening = null;
      this.lose();
    });
    return this.opening;
  }

  private async connect(): Promise<void> {
    const { io } = await import('socket.io-client');
    if (this.watches.size === 0) {
      this.opening = null;
      return;
    }
    const socket: LiveSocket = io({
      path: livePath,
      transports: ['websocket', 'polling'],
      reconnectionDelayMax: 4_000,
    });
    this.socket = socket;
    let before = false;
    socket.on('connect', () => {
      for (const watch of this.watches) watch.begin(socket);
      if (before) this.rejoins.next();
      before = true;
    });
    socket.on('connect_error', () => {
      this.lose();
    });
    socket.on('disconnect', (reason) => {
      this.lose();
      // Closed by the server: a session ended, or the server stops. The library would not try again by itself.
      if (reason === 'io server disconnect') setTimeout(() => this.socket === socket && socket.connect(), patience);
    });
    socket.onAny((name: string, body: unknown) => {
      if (!(name in liveEvents)) return;
      const parsed = liveEvents[name as LiveEventName].safeParse(body);
      if (parsed.success) this.facts.next({ name, body: parsed.data } as Fact);
    });
  }

  private lose(): void {
    this.live.set(false);
    if (this.lostAt() === null && this.watches.size > 0) this.lostAt.set(Date.now());
  }

  private close(): void {
    this.socket?.disconnect();
    this.socket = null;
    this.opening = null;
    this.live.set(false);
    this.lostAt.set(null);
  }
}
