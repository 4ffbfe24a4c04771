export { blobs, idempotencyKeys, uploadPurposeEnum, uploadStateEnum, uploads } from "@/db/schema/blobs";
export {
  calibrationSettingEnum,
  calibrationSettings,
  changeSets,
  computeStateEnum,
  coverages,
  imageChecks,
  imageReadings,
  lookedAt,
  secondAgreements,
} from "@/db/schema/change-sets";
export { channelKeys } from "@/db/schema/channel-keys";
export { comparisonResults, comparisonStateEnum, comparisons } from "@/db/schema/comparisons";
export { decisionKindEnum, decisions, waivers } from "@/db/schema/decisions";
export { descriptionStateEnum, descriptions } from "@/db/schema/descriptions";
export { ledger, ledgerHeads, mailQueue } from "@/db/schema/ledger";
export {
  rateLimits,
  sessions,
  signingPassphrases,
  users,
  verificationTokens,
} from "@/db/schema/people";
export { gatePlans, programmeShares, programmes, vehicleSheets } from "@/db/schema/programmes";
export { intendedUseEnum, revisionStateEnum, revisions } from "@/db/schema/revisions";
export { roadDays } from "@/db/schema/road-days";
export { legEnum, runAnalyses, runKindEnum, runStateEnum, runs } from "@/db/schema/runs";
export { invitations, memberships, roleEnum, workspaces } from "@/db/schema/workspaces";
