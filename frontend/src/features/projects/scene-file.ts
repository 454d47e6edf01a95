import { MAXIMA } from "@heddle/kernels/scene";

/** A scene file as it lies on a disk: read for import, named and written for export. */
export type SceneFile = { document: Record<string, unknown> } | { sentence: string };

/** Reads a file's text as a JSON object; whether it is a scene, the server judges, with every problem named. */
export function readSceneFile(text: string): SceneFile {
  if (new TextEncoder().encode(text).length > MAXIMA.jsonBytes) {
    return {
      sentence: `This file is larger than ${MAXIMA.jsonBytes / 1024 / 1024} MB, the most a scene may have.`,
    };
  }
  let content: unknown;
  try {
    content = JSON.parse(text);
  } catch (error) {
    const detail = error instanceof SyntaxError ? ` (${error.message})` : "";
    return {
      sentence: `This file is not JSON${detail}. A scene file is what “Export the scene file” gives.`,
    };
  }
  if (typeof content !== "object" || content === null || Array.isArray(content)) {
    return {
      sentence:
        "This file holds JSON, but no scene: a scene is an object with a format, a section and a band.",
    };
  }
  return { document: content as Record<string, unknown> };
}

/** "Vented pod, rev C" at revision 4 gives "vented-pod-rev-c.r4.json". */
export function sceneFileName(name: string, revision: number): string {
  const plain = name
    .normalize("NFKD")
    .replaceAll(/\p{M}/gu, "")
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, "-")
    .replaceAll(/^-+|-+$/g, "")
    .slice(0, 80);
  return `${plain === "" ? "scene" : plain}.r${revision}.json`;
}

/** Hands a scene document to the browser as a file. */
export function saveSceneFile(document: Record<string, unknown>, fileName: string): void {
  const address = URL.createObjectURL(
    new Blob([`${JSON.stringify(document, null, 2)}\n`], { type: "application/json" }),
  );
  const link = window.document.createElement("a");
  link.href = address;
  link.download = fileName;
  link.click();
  URL.revokeObjectURL(address);
}
