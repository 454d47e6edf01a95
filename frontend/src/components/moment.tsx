import { whenInWords, wholeMoment } from "../lib/moments";

/** A moment in short words, whole on hover. */
export function Moment({ at }: { at: string }) {
  return (
    <time dateTime={at} title={wholeMoment(at)} style={{ whiteSpace: "nowrap" }}>
      {whenInWords(at)}
    </time>
  );
}
