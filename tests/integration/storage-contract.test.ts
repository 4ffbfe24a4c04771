import { describeStoreContract } from "@/tests/support/store-contract";
import { filesystemHarness, s3Harness } from "@/tests/support/store-harness";

describeStoreContract("filesystem", filesystemHarness);
describeStoreContract("S3", s3Harness);
