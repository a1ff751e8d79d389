import { HttpClient, HttpEventType } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { type Observable, filter, map } from 'rxjs';
import { pathOf } from '@shared/route';
import { type SheetPage, scriptsRoutes } from '@shared/scripts';
import { ApiClient } from './api-client';

/** An answer on its way to the server. */
export interface AnswerSave {
  readonly answerId: string;
  readonly text: string;
  /** The saved version that was typed over. */
  readonly version: number;
  readonly idempotencyKey: string;
}

/** How far an upload is, then the page that it became. */
export type UploadNews = { readonly share: number } | { readonly page: SheetPage };

/** A student's own sheets, their worked pages and receipts. */
@Injectable({ providedIn: 'root' })
export class ScriptsApi {
  private readonly api = inject(ApiClient);
  private readonly http = inject(HttpClient);

  sheets(courseId: string) {
    return this.api.call(scriptsRoutes.sheets, { params: { courseId } });
  }

  sheet(setId: string) {
    return this.api.call(scriptsRoutes.sheet, { params: { setId } });
  }

  saveAnswer({ answerId, text, version, idempotencyKey }: AnswerSave) {
    return this.api.call(scriptsRoutes.saveAnswer, { params: { answerId }, body: { text }, version, idempotencyKey });
  }

  /** Sends a save that outlives the page. Nobody hears its answer; the same key sent again is the same save. */
  saveInPassing({ answerId, text, version, idempotencyKey }: AnswerSave): void {
    const body = JSON.stringify({ text });
    // Browsers refuse larger bodies of requests that outlive their page; the copy in the browser serves then.
    if (body.length > 60_000) return;
    void fetch(`/api${pathOf(scriptsRoutes.saveAnswer, { answerId })}`, {
      method: 'PUT',
      keepalive: true,
      headers: {
        'Content-Type': 'application/json',
        'If-Match': `"${String(version)}"`,
        'Idempotency-Key': idempotencyKey,
      },
      body,
    }).catch(() => {
      // The page is going; what could not be sent is in the browser's own copy.
    });
  }

  addPage(answerId: string, file: Blob, idempotencyKey: string): Observable<UploadNews> {
    const { path, method, response } = { ...scriptsRoutes.addPage, path: pathOf(scriptsRoutes.addPage, { answerId }) };
    return this.http
      .request<unknown>(method, `/api${path}`, {
        body: file,
        headers: { 'Idempotency-Key': idempotencyKey, 'Content-Type': 'application/octet-stream' },
        observe: 'events',
        reportProgress: true,
      })
      .pipe(
        map((event): UploadNews | null => {
          if (event.type === HttpEventType.UploadProgress) return { share: event.loaded / (event.total ?? file.size) };
          if (event.type === HttpEventType.Response) return { page: response.parse(event.body) };
          return null;
        }),
        filter((news) => news !== null),
      );
  }

  removePage(pageId: string) {
    return this.api.call(scriptsRoutes.removePage, { params: { pageId } });
  }

  restorePage(pageId: string) {
    return this.api.call(scriptsRoutes.restorePage, { params: { pageId } });
  }

  submitSheet(setId: string, idempotencyKey: string) {
    return this.api.call(scriptsRoutes.submitSheet, { params: { setId }, idempotencyKey });
  }

  receipt(setId: string) {
    return this.api.call(scriptsRoutes.receipt, { params: { setId } });
  }
}
