import { useEffect, useRef } from 'react';

interface ImageViewProps {
  file: Blob;
  label: string;
  zoom: number;
  rotation: number;
}

/** A picture of a source document, zoomed and turned. */
export function ImageView({ file, label, zoom, rotation }: ImageViewProps) {
  const image = useRef<HTMLImageElement>(null);
  useEffect(() => {
    const url = URL.createObjectURL(file);
    if (image.current) image.current.src = url;
    return () => URL.revokeObjectURL(url);
  }, [file]);
  return (
    <div
      role="region"
      aria-label={label}
      // A region that scrolls must be reachable by keyboard (WCAG 2.1.1).
      // eslint-disable-next-line jsx-a11y/no-noninteractive-tabindex
      tabIndex={0}
      className="h-full overflow-auto bg-rule-soft p-2"
    >
      <img
        ref={image}
        alt={label}
        className="mx-auto block max-w-none"
        style={{ width: `${zoom * 100}%`, rotate: `${rotation}deg` }}
      />
    </div>
  );
}
