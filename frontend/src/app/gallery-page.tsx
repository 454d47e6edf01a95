export function GalleryPage() {
  return null;
}
