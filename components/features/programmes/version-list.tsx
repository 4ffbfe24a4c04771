import type { Route } from "next";
import Link from "next/link";
import { DateTime } from "@/components/ui/data/date-time";
import { Tag } from "@/components/ui/data/tag";
import { cn } from "@/lib/cn";

export interface VersionListProps {
  /** Path of the page; a version is read at `?version=`. */
  path: string;
  shown: number;
  /** Newest first. */
  versions: readonly { version: number; createdAt: Date; createdByName: string | null }[];
}

/** Versions of a sheet or a plan; each stays readable for ever. */
export function VersionList({ path, shown, versions }: VersionListProps) {
  return (
    <ol reversed className="flex flex-col">
      {versions.map((line, index) => {
        const here = line.version === shown;
        return (
          <li key={line.version} className="border-line border-t first:border-t-0">
            <Link
              href={(index === 0 ? path : `${path}?version=${line.version}`) as Route}
              aria-current={here ? "page" : undefined}
              className={cn(
                "relative flex min-h-control flex-wrap items-center gap-x-3 gap-y-1 py-2 hover:underline",
                here && "font-semibold",
              )}
            >
              <Tag tone={here ? "strong" : "plain"}>v{line.version}</Tag>
              <span className="text-13">
                <DateTime at={line.createdAt} zone="UTC" />
                {line.createdByName && ` by ${line.createdByName}`}
              </span>
            </Link>
          </li>
        );
      })}
    </ol>
  );
}
