import { selectRevision } from "@/db/queries/revisions";
import { authorise, type Ctx } from "@/lib/services/ctx";
import { noRevision } from "@/lib/services/revisions/load";
import { differenceOf, openCalibrationImage, summarise } from "@/lib/services/revisions/read-image";
import { type ImagePreview, type PreviewImage, previewImage } from "@/lib/services/revisions/schema";
import { sealUpload } from "@/lib/services/uploads/seal";

/**
 * What was understood of an uploaded image before it joins the lineage.
 * @throws FileRefusedError when it can't be read or is in doubt
 */
export async function previewUploadedImage(ctx: Ctx, input: PreviewImage): Promise<ImagePreview> {
  const { uploadId, parentId, baseAddress } = previewImage.parse(input);
  authorise(ctx, "revision.upload");
  const sealed = await sealUpload(ctx, { uploadId, purpose: "image" });
  const image = await openCalibrationImage(ctx, {
    imageSha256: sealed.sha256,
    imageFileName: sealed.fileName,
    imageBaseAddress: baseAddress,
  });
  const summary = summarise(image);
  const { fileName, sizeBytes, sha256 } = sealed;
  if (parentId === null) return { fileName, sizeBytes, sha256, summary, difference: null };
  const parent = await selectRevision(ctx.db, { workspaceId: ctx.workspaceId, revisionId: parentId });
  if (!parent) throw noRevision();
  const difference = differenceOf(await openCalibrationImage(ctx, parent), image);
  const sameContent = parent.imageSummary.identity === summary.identity;
  return {
    fileName,
    sizeBytes,
    sha256,
    summary,
    difference: { ...difference, parentNumber: parent.number, sameContent },
  };
}
