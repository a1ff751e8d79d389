import { Injectable, inject } from '@angular/core';
import { tryOutRoutes } from '@shared/try-outs';
import { ApiClient } from './api-client';

/** What is typed in a try-out, by the part's id, and how long somebody was at it. */
interface Typed {
  readonly answers: Readonly<Record<string, string>>;
  readonly activeSeconds: number;
}

/** Try-outs of problems. */
@Injectable({ providedIn: 'root' })
export class TryOutsApi {
  private readonly api = inject(ApiClient);

  tryOuts(problemId: string) {
    return this.api.call(tryOutRoutes.tryOuts, { params: { problemId } });
  }

  beginTryOut(problemId: string) {
    return this.api.call(tryOutRoutes.beginTryOut, { params: { problemId } });
  }

  keepTryOut(problemId: string, tryOutId: string, body: Typed) {
    return this.api.call(tryOutRoutes.keepTryOut, { params: { problemId, tryOutId }, body });
  }

  handInTryOut(problemId: string, tryOutId: string, body: Typed) {
    return this.api.call(tryOutRoutes.handInTryOut, { params: { problemId, tryOutId }, body });
  }
}
