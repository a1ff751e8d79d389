import { Injectable, inject } from '@angular/core';
import { Title } from '@angular/platform-browser';
import { type RouterStateSnapshot, TitleStrategy } from '@angular/router';

/** Puts each page's name before the product's in the window title. */
@Injectable({ providedIn: 'root' })
export class PageTitle extends TitleStrategy {
  private readonly title = inject(Title);

  override updateTitle(snapshot: RouterStateSnapshot): void {
    const page = this.buildTitle(snapshot);
    this.set(page ?? '');
  }

  /** For pages whose name is known only when their data has come. */
  set(page: string): void {
    this.title.setTitle(page ? `${page} · Halfsilver` : 'Halfsilver');
  }
}
