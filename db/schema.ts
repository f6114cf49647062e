/** The database: all table interfaces put together. */
import type { PersonTable } from './tables/person.ts'
import type { SessionTable } from './tables/session.ts'
import type { AccountTokenTable } from './tables/account-token.ts'
import type { SigninAttemptTable } from './tables/signin-attempt.ts'
import type { AccountMailTable } from './tables/account-mail.ts'
import type { OrganisationTable } from './tables/organisation.ts'
import type { MembershipTable } from './tables/membership.ts'
import type { InvitationTable } from './tables/invitation.ts'
import type { PropertyTable } from './tables/property.ts'
import type { PropertyAccessTable } from './tables/property-access.ts'
import type { UnitTable } from './tables/unit.ts'
import type { TenancyTable } from './tables/tenancy.ts'
import type { HardwareRecordTable } from './tables/hardware-record.ts'
import type { MeasuredDurationTable } from './tables/measured-duration.ts'
import type { PreferenceTable } from './tables/preference.ts'
import type { TariffTable } from './tables/tariff.ts'
import type { TariffVersionTable } from './tables/tariff-version.ts'
import type { EvaluationTable } from './tables/evaluation.ts'
import type { RunTable } from './tables/run.ts'
import type { PlanTable } from './tables/plan.ts'
import type { PlanStartTable } from './tables/plan-start.ts'
import type { FlagTable } from './tables/flag.ts'
import type { VisitTable } from './tables/visit.ts'
import type { VisitFlagTable } from './tables/visit-flag.ts'
import type { MessageTable } from './tables/message.ts'
import type { SuppressionTable } from './tables/suppression.ts'
import type { DigestTable } from './tables/digest.ts'
import type { FeedbackTable } from './tables/feedback.ts'
import type { CalendarFeedTable } from './tables/calendar-feed.ts'
import type { AuditEntryTable } from './tables/audit-entry.ts'
import type { JobLeaseTable } from './tables/job-lease.ts'
import type { JobRunTable } from './tables/job-run.ts'

import type { AccountEventTable } from './tables/account-event.ts'

export interface Database {
  account_event: AccountEventTable
  person: PersonTable
  session: SessionTable
  account_token: AccountTokenTable
  signin_attempt: SigninAttemptTable
  account_mail: AccountMailTable
  organisation: OrganisationTable
  membership: MembershipTable
  invitation: InvitationTable
  property: PropertyTable
  property_access: PropertyAccessTable
  unit: UnitTable
  tenancy: TenancyTable
  hardware_record: HardwareRecordTable
  measured_duration: MeasuredDurationTable
  preference: PreferenceTable
  tariff: TariffTable
  tariff_version: TariffVersionTable
  evaluation: EvaluationTable
  run: RunTable
  plan: PlanTable
  plan_start: PlanStartTable
  flag: FlagTable
  visit: VisitTable
  visit_flag: VisitFlagTable
  message: MessageTable
  suppression: SuppressionTable
  digest: DigestTable
  feedback: FeedbackTable
  calendar_feed: CalendarFeedTable
  audit_entry: AuditEntryTable
  job_lease: JobLeaseTable
  job_run: JobRunTable
}
