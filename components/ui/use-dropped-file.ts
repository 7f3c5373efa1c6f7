"use client";

import { useEffect, useRef, useState } from "react";

/**
 * Files dropped anywhere on the page. A drop that nobody takes would make the browser leave the page for the file.
 *
 * @returns whether a file hangs over the page
 */
export function useDroppedFile(onFile: (file: File) => void): boolean {
  const [isOver, setIsOver] = useState(false);
  const handler = useRef(onFile);
  useEffect(() => {
    handler.current = onFile;
  });
  useEffect(() => {
    const hasFiles = (event: DragEvent) => event.dataTransfer?.types.includes("Files") === true;
    const over = (event: DragEvent) => {
      if (!hasFiles(event)) return;
      event.preventDefault();
      setIsOver(true);
    };
    const leave = (event: DragEvent) => {
      if (event.relatedTarget === null) setIsOver(false);
    };
    const drop = (event: DragEvent) => {
      if (!hasFiles(event)) return;
      event.preventDefault();
      setIsOver(false);
      const file = event.dataTransfer?.files[0];
      if (file !== undefined) handler.current(file);
    };
    window.addEventListener("dragover", over);
    window.addEventListener("dragleave", leave);
    window.addEventListener("drop", drop);
    return () => {
      window.removeEventListener("dragover", over);
      window.removeEventListener("dragleave", leave);
      window.removeEventListener("drop", drop);
    };
  }, []);
  return isOver;
}
