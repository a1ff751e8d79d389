import { Injectable, inject } from '@angular/core';
import { ownDataRoutes } from '@shared/own-data';
import { ApiClient } from './api-client';

/** What is held about the person who is signed in. */
@Injectable({ providedIn: 'root' })
export class OwnDataApi {
  private readonly api = inject(ApiClient);

  /** Where the browser fetches everything as a file. */
  readonly fileAddress = `/api${ownDataRoutes.ownData.path}`;

  looks() {
    return this.api.call(ownDataRoutes.looks);
  }
}
