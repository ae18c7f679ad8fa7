"use client";

import { useRef, useState, type ChangeEvent } from "react";
import { useDropzone } from "react-dropzone";
import { Button } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";

interface DropZoneProps {
  readonly onFiles: (files: readonly File[]) => Promise<void>;
}

/** Where files and whole folders are dropped; both can be chosen by button as well. */
export function DropZone({ onFiles }: DropZoneProps) {
  const [isReading, setIsReading] = useState(false);
  const folderInput = useRef<HTMLInputElement>(null);
  const take = async (files: readonly File[]) => {
    setIsReading(true);
    try {
      await onFiles(files);
    } finally {
      setIsReading(false);
    }
  };
  const { getRootProps, getInputProps, isDragActive, open } = useDropzone({
    onDrop: (files) => void take(files),
    noClick: true,
    noKeyboard: true,
  });
  const onFolder = (event: ChangeEvent<HTMLInputElement>) => {
    const files = [...(event.target.files ?? [])];
    // Emptied, so that the same folder can be chosen again.
    event.target.value = "";
    void take(files);
  };
  return (
    <div
      {...getRootProps()}
      className={classNames(
        "border-2 border-dashed px-6 py-8 text-center",
        isDragActive ? "border-petrol bg-tray" : "border-line",
      )}
    >
      <input {...getInputProps({ "aria-label": "Files to bring in" })} />
      <input
        ref={folderInput}
        type="file"
        multiple
        hidden
        aria-label="Folder to bring in"
        onChange={onFolder}
        {...{ webkitdirectory: "" }}
      />
      <p className="text-lg font-semibold">
        {isDragActive ? "Let go: everything in it is looked through" : "Drop files or whole folders here"}
      </p>
      <div className="mt-4 flex flex-wrap justify-center gap-3">
        <Button tone="petrol" onClick={open} isBusy={isReading}>
          Choose files
        </Button>
        <Button onClick={() => folderInput.current?.click()} isBusy={isReading}>
          Choose a folder
        </Button>
      </div>
      <p className="mx-auto mt-4 max-w-[60ch] text-sm text-quiet">
        JPEG, TIFF, PNG and WebP are measured and sorted. Raw files are kept with the picture of the same name. Folders
        inside folders are looked through, and their names are kept.
      </p>
      <p role="status" className="text-sm">
        {isReading ? "Looking through what was chosen…" : ""}
      </p>
    </div>
  );
}
