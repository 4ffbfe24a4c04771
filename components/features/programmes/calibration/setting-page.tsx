import type { Route } from "next";
import Link from "next/link";
import type { ReactNode } from "react";
import { VersionList, type VersionListProps } from "@/components/features/programmes/version-list";
import { Card } from "@/components/ui/layout/card";
import { PageHeading } from "@/components/ui/layout/page-heading";
import { EmptyState } from "@/components/ui/status/empty-state";
import { Notice } from "@/components/ui/status/notice";

export interface SettingPageProps {
  above: ReactNode;
  title: string;
  lead: string;
  path: string;
  setting: { shown: { version: number }; newestVersion: number; versions: VersionListProps["versions"] };
  /** To be changed; null: this person may not, or it is an old version. */
  form: ReactNode;
  /** To be read; null: there is nothing in it. */
  readable: ReactNode;
  /** Why it can't be changed by this person. */
  refused: string | null;
  empty: string;
  aside: ReactNode;
}

/** A versioned setting of a programme: the newest to be changed, older ones to be read. */
export function SettingPage(props: SettingPageProps) {
  const { above, title, lead, path, setting, form, readable, refused, empty, aside } = props;
  const { shown, newestVersion, versions } = setting;
  const isNewest = shown.version === newestVersion;
  return (
    <div className="flex flex-col gap-8">
      <PageHeading
        above={above}
        title={shown.version === 0 ? title : `${title}, version ${shown.version}`}
        lead={lead}
      />
      <div className="grid gap-6 lg:grid-cols-[minmax(0,1fr)_19rem]">
        <div className="flex min-w-0 flex-col gap-4">
          {!isNewest && (
            <Notice title={`This is version ${shown.version}; the newest is ${newestVersion}`}>
              It can't be changed.{" "}
              <Link href={path as Route} className="link">
                To the newest
              </Link>
            </Notice>
          )}
          {isNewest && form ? (
            <Card>{form}</Card>
          ) : readable ? (
            <Card>{readable}</Card>
          ) : (
            <EmptyState sentence={empty} />
          )}
          {isNewest && !form && refused && <p className="text-13 text-ink2">{refused}</p>}
        </div>
        <div className="flex flex-col gap-6 self-start">
          {versions.length > 0 && (
            <Card title="Versions">
              <VersionList path={path} shown={shown.version} versions={versions} />
            </Card>
          )}
          {aside}
        </div>
      </div>
    </div>
  );
}
