import { describe, expect, it } from "vitest";
import { EnvironmentError, parseEnv } from "@/lib/env";

const COMPLETE = {
  NODE_ENV: "production",
  DATABASE_URL: "postgres://app:pw@127.0.0.1:5432/twinpass",
  AUTH_SECRET: "a".repeat(32),
  AUTH_URL: "http://localhost:3000",
  STORAGE_LINK_SECRET: "b".repeat(32),
  STORAGE_ROOT: "/data/objects",
  MAIL_FOLDER: "/data/mail",
};

function refusal(source: Record<string, string | undefined>): string {
  try {
    parseEnv(source);
  } catch (error) {
    expect(error).toBeInstanceOf(EnvironmentError);
    return (error as Error).message;
  }
  throw new Error("parseEnv accepted the settings");
}

describe("parseEnv", () => {
  it("takes the embedded defaults: files on disk, mail folder, no demo", () => {
    const env = parseEnv(COMPLETE);
    expect(env).toMatchObject({
      STORAGE_DRIVER: "filesystem",
      STORAGE_ROOT: "/data/objects",
      DEMO_MODE: false,
    });
    expect(env.MAIL_FROM).toContain("@");
    expect(env.DATABASE_OWNER_URL).toBeUndefined();
  });

  it("reads the flags as booleans", () => {
    expect(parseEnv({ ...COMPLETE, DEMO_MODE: "1" }).DEMO_MODE).toBe(true);
    expect(parseEnv({ ...COMPLETE, DEMO_MODE: "0" }).DEMO_MODE).toBe(false);
    expect(refusal({ ...COMPLETE, DEMO_MODE: "yes" })).toContain("DEMO_MODE must be 0 or 1");
  });

  it("names every missing setting at once, an empty text counting as missing", () => {
    const message = refusal({ ...COMPLETE, DATABASE_URL: undefined, AUTH_SECRET: "", STORAGE_ROOT: "" });
    for (const name of ["DATABASE_URL", "AUTH_SECRET", "STORAGE_ROOT"]) {
      expect(message).toContain(`${name} is missing`);
    }
    expect(message).toContain("npm start");
  });

  it("never repeats a value, because values are secrets", () => {
    expect(refusal({ ...COMPLETE, AUTH_SECRET: "hunter2" })).not.toContain("hunter2");
    expect(refusal({ ...COMPLETE, DATABASE_URL: "mysql://u:hunter2@h/d" })).not.toContain("hunter2");
  });

  it("asks for the settings of the chosen storage driver only", () => {
    const message = refusal({ ...COMPLETE, STORAGE_DRIVER: "s3", STORAGE_ROOT: undefined });
    expect(message).toContain("S3_BUCKET is missing");
    expect(message).not.toContain("STORAGE_ROOT");
    expect(refusal({ ...COMPLETE, STORAGE_DRIVER: "tape" })).toContain(
      "STORAGE_DRIVER must be filesystem or s3",
    );
    const env = parseEnv({
      ...COMPLETE,
      STORAGE_DRIVER: "s3",
      S3_REGION: "eu",
      S3_BUCKET: "twinpass",
      S3_ACCESS_KEY_ID: "id",
      S3_SECRET_ACCESS_KEY: "key",
      S3_FORCE_PATH_STYLE: "1",
    });
    expect(env).toMatchObject({ S3_BUCKET: "twinpass", S3_FORCE_PATH_STYLE: true });
  });

  it("needs one way to send mail", () => {
    expect(refusal({ ...COMPLETE, MAIL_FOLDER: undefined })).toContain("SMTP_URL");
    const env = parseEnv({ ...COMPLETE, MAIL_FOLDER: undefined, SMTP_URL: "smtp://mail.example:587" });
    expect(env.SMTP_URL).toBe("smtp://mail.example:587");
  });
});
