import { mkdtemp, readdir, rm } from "node:fs/promises";
import { createServer } from "node:http";
import type { AddressInfo } from "node:net";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { CreateBucketCommand, S3Client } from "@aws-sdk/client-s3";
import { TwinpassError } from "@/lib/errors";
import { openStore, type StoreConfig } from "@/storage/open";
import type { ObjectStore, StoreFacts } from "@/storage/port";
import type { S3Config } from "@/storage/s3";
import { verifySignedLink } from "@/storage/signed-link";
import { type S3Server, startS3Server } from "@/tests/support/s3-server";

/** One store under test and what only its surroundings can tell. */
export interface StoreHarness {
  store: ObjectStore;
  config: StoreConfig;
  conditionalCreate: StoreFacts["conditionalCreate"];
  /** Follows a signed link, as a browser would. */
  follow: (url: string, method?: string) => Promise<Response>;
  /** Lets time pass for signed links. */
  pass: (ms: number) => Promise<void>;
  /** Every name in and around the store, to see that nothing was written elsewhere. */
  rawNames: () => Promise<string[]>;
  /** Temporary files or open multipart uploads. */
  unfinished: () => Promise<number>;
  close: () => Promise<void>;
}

export async function filesystemHarness(): Promise<StoreHarness> {
  const around = await mkdtemp(join(tmpdir(), "twinpass-store-"));
  const linkSecret = "a secret of the tests, 32 characters and more";
  const config = {
    driver: "filesystem",
    root: join(around, "root"),
    linkSecret,
    linkPath: "/files",
  } as const;
  const store = await openStore(config);
  let skewMs = 0;
  // Stands in for the product's route: check the link, then give the bytes out.
  const route = createServer(async (request, response) => {
    try {
      const { searchParams } = new URL(request.url ?? "", "http://localhost");
      const claim = verifySignedLink(linkSecret, request.method ?? "", searchParams, Date.now() + skewMs);
      const { body, sizeBytes } = await store.get(claim.key);
      response.writeHead(200, {
        "content-length": sizeBytes,
        "content-type": claim.contentType,
        "content-disposition": claim.contentDisposition,
      });
      body.pipe(response);
    } catch (error) {
      response.writeHead(error instanceof TwinpassError ? error.status : 500).end();
    }
  });
  await new Promise<void>((resolve) => route.listen(0, "127.0.0.1", resolve));
  const { port } = route.address() as AddressInfo;
  return {
    store,
    config,
    conditionalCreate: "atomic",
    follow: async (url, method = "GET") => await fetch(`http://127.0.0.1:${port}${url}`, { method }),
    pass: async (ms) => {
      skewMs += ms;
    },
    rawNames: async () => (await readdir(around, { recursive: true })).sort(),
    unfinished: async () => (await readdir(join(config.root, "tmp"))).length,
    close: async () => {
      route.closeAllConnections();
      await new Promise((resolve) => route.close(resolve));
      await rm(around, { recursive: true, force: true });
    },
  };
}

export async function createBucket(config: S3Config): Promise<void> {
  const client = new S3Client({
    endpoint: config.endpoint,
    region: config.region,
    forcePathStyle: true,
    credentials: config,
    requestChecksumCalculation: "WHEN_REQUIRED",
  });
  await client.send(new CreateBucketCommand({ Bucket: config.bucket }));
  client.destroy();
}

export async function s3Harness(): Promise<StoreHarness & { server: S3Server }> {
  const server = await startS3Server();
  const { endpoint, keys } = server;
  const config = { driver: "s3", endpoint, bucket: "twinpass-test", forcePathStyle: true, ...keys } as const;
  await createBucket(config);
  return {
    server,
    store: await openStore(config),
    config,
    conditionalCreate: "atomic",
    follow: async (url, method = "GET") => await fetch(url, { method }),
    pass: async (ms) => server.advanceMs(ms),
    rawNames: async () => [...server.bucket.objects.keys()].sort(),
    unfinished: async () => server.bucket.uploads.size,
    close: server.close,
  };
}
