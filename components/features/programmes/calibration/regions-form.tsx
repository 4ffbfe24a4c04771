"use client";

import { zodResolver } from "@hookform/resolvers/zod";
import { Plus } from "lucide-react";
import { FormProvider, useFieldArray, useForm } from "react-hook-form";
import { z } from "zod";
import { RegionFields, type RegionsFields } from "@/components/features/programmes/calibration/region-fields";
import {
  NEW_REGION,
  regionOf,
  typedOf,
  typedRegion,
} from "@/components/features/programmes/calibration/region-values";
import {
  SaveVersion,
  useSaveVersion,
  type VersionAnswer,
} from "@/components/features/programmes/save-version";
import { Button } from "@/components/ui/action/button";
import type { ChecksumRegion } from "@/lib/calibration/image/checksum-regions";

export interface RegionsFormProps {
  programmeId: string;
  version: number;
  regions: readonly ChecksumRegion[];
  blockedBecause: string | null;
  action: (input: {
    programmeId: string;
    basedOnVersion: number;
    regions: ChecksumRegion[];
  }) => Promise<VersionAnswer>;
}

const schema = z.object({ regions: z.array(typedRegion).max(50, "At most 50 regions.") });

/** The newest regions, to be changed into the next version; every image of the programme is then checked anew. */
export function RegionsForm({ programmeId, version, regions, blockedBecause, action }: RegionsFormProps) {
  const form = useForm<RegionsFields, unknown, z.output<typeof schema>>({
    resolver: zodResolver(schema),
    defaultValues: { regions: regions.map(typedOf) },
  });
  const { fields, append, remove } = useFieldArray({
    control: form.control,
    name: "regions",
    keyName: "key",
  });
  const { save, ...state } = useSaveVersion(version);
  const send = form.handleSubmit((values) =>
    save(() => action({ programmeId, basedOnVersion: version, regions: values.regions.map(regionOf) })),
  );
  const wrong = Object.keys(form.formState.errors).length > 0;
  return (
    <FormProvider {...form}>
      <form onSubmit={send} noValidate className="flex flex-col gap-6">
        {fields.length === 0 && (
          <p className="text-15">
            No region is declared. Images are then checked by their fingerprint alone.
          </p>
        )}
        <ul>
          {fields.map((region, index) => (
            <RegionFields key={region.key} index={index} onRemove={() => remove(index)} />
          ))}
        </ul>
        <div>
          <Button icon={<Plus />} onClick={() => append({ ...NEW_REGION })}>
            Add a region
          </Button>
        </div>
        <SaveVersion
          version={version}
          blockedBecause={blockedBecause}
          {...state}
          problem={wrong ? "Some fields need another look: each says why." : state.problem}
        />
      </form>
    </FormProvider>
  );
}
