"use client";

import { useRef } from "react";
import { Button, type ButtonKind } from "@/components/ui/button";

interface FileButtonProps {
  children: string;
  onFiles: (files: File[]) => void;
  multiple?: boolean;
  accept?: string;
  kind?: ButtonKind;
  wide?: boolean;
  busy?: string | false;
}

/** A button that opens the file picker. */
export function FileButton({ children, onFiles, multiple, accept, kind, wide, busy }: FileButtonProps) {
  const input = useRef<HTMLInputElement>(null);
  return (
    <>
      <Button busy={busy} kind={kind} onClick={() => input.current?.click()} wide={wide}>
        {children}
      </Button>
      <input
        accept={accept}
        aria-hidden
        data-files={children}
        hidden
        multiple={multiple}
        onChange={(event) => {
          const files = [...(event.target.files ?? [])];
          event.target.value = "";
          if (files.length > 0) onFiles(files);
        }}
        ref={input}
        tabIndex={-1}
        type="file"
      />
    </>
  );
}

export const AUDIO_FILES = ".wav,.wave,.bwf,.rf64,.bw64,.aif,.aiff,.aifc,.flac,audio/*";
