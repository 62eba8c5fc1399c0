import { useEffect, useState } from 'preact/hooks';
import { droppedFiles } from './dropped-files.ts';
import { takeInFiles } from './file-actions.ts';

/** The whole window takes files; while something hangs over it, it says so. */
export function DropZone() {
  const [over, setOver] = useState(false);
  useEffect(() => {
    let depth = 0;
    const enter = (event: DragEvent): void => {
      if (!event.dataTransfer?.types.includes('Files')) return;
      event.preventDefault();
      depth++;
      setOver(true);
    };
    const leave = (): void => {
      depth = Math.max(0, depth - 1);
      if (depth === 0) setOver(false);
    };
    const hover = (event: DragEvent): void => {
      if (event.dataTransfer?.types.includes('Files')) event.preventDefault();
    };
    const drop = (event: DragEvent): void => {
      depth = 0;
      setOver(false);
      if (!event.dataTransfer?.types.includes('Files')) return;
      event.preventDefault();
      void droppedFiles(event.dataTransfer).then(({ files, folder }) => takeInFiles(files, folder));
    };
    window.addEventListener('dragenter', enter);
    window.addEventListener('dragleave', leave);
    window.addEventListener('dragover', hover);
    window.addEventListener('drop', drop);
    return () => {
      window.removeEventListener('dragenter', enter);
      window.removeEventListener('dragleave', leave);
      window.removeEventListener('dragover', hover);
      window.removeEventListener('drop', drop);
    };
  }, []);
  return over ? <div class="dropping">Drop clips, a folder of clips, or a test file</div> : null;
}
