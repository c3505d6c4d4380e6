import { useEffect, useState, type ReactElement } from 'react';
import type { Item } from './item.ts';

/** The file's own picture until the server has made one. Browsers cannot draw HEIC, so that one waits. */
function useFilePicture(file: File | null): string | null {
  const [url, setUrl] = useState<string | null>(null);
  useEffect(() => {
    if (!file || !/^image\/(jpeg|png|webp|avif)$/.test(file.type)) return undefined;
    const made = URL.createObjectURL(file);
    setUrl(made);
    return () => {
      URL.revokeObjectURL(made);
      setUrl(null);
    };
  }, [file]);
  return url;
}

const frame = 'aspect-[4/3] w-full border border-rule bg-sapwood object-cover';

export function Thumbnail({ item }: { readonly item: Item }): ReactElement {
  const ownPicture = useFilePicture(item.file);
  const picture = item.photo?.picture;
  if (picture) return <img className={frame} src={picture.src} srcSet={picture.srcset} sizes="9rem" width={picture.width} height={picture.height} alt={picture.alt} loading="lazy" draggable={false} />;
  if (ownPicture) return <img className={`${frame} opacity-70`} src={ownPicture} alt="" draggable={false} />;
  return <div className={frame} />;
}
