import { ChangeDetectionStrategy, Component, computed, inject, input } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { timeOf } from '@shared/times';
import { Session } from '../../../core/session';
import { JobProgress } from '../../../ui/job-progress/job-progress';
import { ProblemAudit } from './problem-audit';

/** What the key audit found about a part, in words with the variant that shows it. */
@Component({
  selector: 'app-audit-findings',
  imports: [JobProgress, MatButtonModule],
  templateUrl: './audit-findings.html',
  styleUrl: './audit-findings.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class AuditFindings {
  private readonly session = inject(Session);
  protected readonly audit = inject(ProblemAudit);

  readonly part = input.required<number>();

  protected readonly own = computed(() => this.audit.findingsOf(this.part()));
  protected readonly ofAll = computed(() => this.audit.findingsOf(null));
  protected readonly inOrder = computed(
    () => this.audit.audit()?.parts.find(({ part }) => part === this.part())?.inOrder ?? '',
  );
  protected readonly what = computed(() => {
    const audit = this.audit.audit();
    if (!audit) return '';
    const variants = audit.variants === 1 ? 'the only variant' : `${String(audit.variants)} variants`;
    return `${variants}, ${timeOf(audit.at, this.session.course()?.timeZone ?? 'UTC')}`;
  });
}
