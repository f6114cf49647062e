/** Branded ids: what can be confused gets its own type; a string becomes an id only in its parser. */
import { randomUUID } from 'node:crypto'

export type Brand<T, Name extends string> = T & { readonly __brand: Name }

const ID_PATTERN = /^[0-9a-z-]{1,64}$/

/** Makes the parser of one id type; answers `null` for anything that cannot be an id. */
const idParser =
  <Id extends string>() =>
  (value: unknown): Id | null =>
    // The only place where a string becomes an id: the pattern has just been checked.
    typeof value === 'string' && ID_PATTERN.test(value) ? (value as Id) : null

export type OrganisationId = Brand<string, 'OrganisationId'>
export type PersonId = Brand<string, 'PersonId'>
export type InvitationId = Brand<string, 'InvitationId'>
export type PropertyId = Brand<string, 'PropertyId'>
export type UnitId = Brand<string, 'UnitId'>
export type TenancyId = Brand<string, 'TenancyId'>
export type HardwareRecordId = Brand<string, 'HardwareRecordId'>
export type PreferenceId = Brand<string, 'PreferenceId'>
export type TariffId = Brand<string, 'TariffId'>
export type TariffVersionId = Brand<string, 'TariffVersionId'>
export type RunId = Brand<string, 'RunId'>
export type EvaluationId = Brand<string, 'EvaluationId'>
export type FlagId = Brand<string, 'FlagId'>
export type VisitId = Brand<string, 'VisitId'>
export type MessageId = Brand<string, 'MessageId'>
export type DigestId = Brand<string, 'DigestId'>
export type FeedId = Brand<string, 'FeedId'>
export type PlanId = Brand<string, 'PlanId'>

export const parseOrganisationId = idParser<OrganisationId>()
export const parsePersonId = idParser<PersonId>()
export const parseInvitationId = idParser<InvitationId>()
export const parsePropertyId = idParser<PropertyId>()
export const parseUnitId = idParser<UnitId>()
export const parseTenancyId = idParser<TenancyId>()
export const parseFlagId = idParser<FlagId>()
export const parseVisitId = idParser<VisitId>()
export const parseMessageId = idParser<MessageId>()
export const parseDigestId = idParser<DigestId>()
export const parseFeedId = idParser<FeedId>()
export const parsePlanId = idParser<PlanId>()

/** A fresh random id of the type asked for, e.g. `newId<UnitId>()`. */
export const newId = <Id extends string>(): Id => randomUUID() as string as Id
