export interface PageView {
  page: number;
  /** CSS pixels. */
  width: number;
  rotation: number;
}

/** An open document that can draw its pages. */
export interface OpenPdf {
  pages: number;
  /** Draws a page; a cancelled drawing ends without an error. */
  draw(canvas: HTMLCanvasElement, view: PageView): { done: Promise<void>; cancel: () => void };
  close(): void;
}

/** Opens a PDF of our own origin in pdf.js with its own worker; nothing in it is run. */
export async function openPdf(url: string): Promise<OpenPdf> {
  const [pdfjs, worker] = await Promise.all([
    import('pdfjs-dist'),
    import('pdfjs-dist/build/pdf.worker.min.mjs?url'),
  ]);
  pdfjs.GlobalWorkerOptions.workerSrc = worker.default;
  const loading = pdfjs.getDocument({ url, isEvalSupported: false, useSystemFonts: true });
  const document = await loading.promise;

  return {
    pages: document.numPages,
    draw: (canvas, { page, width, rotation }) => {
      let cancelled = false;
      let stop = () => undefined as void;
      const render = async () => {
        const proxy = await document.getPage(page);
        if (cancelled) return;
        const turned = (proxy.rotate + rotation) % 360;
        const natural = proxy.getViewport({ scale: 1, rotation: turned });
        const scale = width / natural.width;
        const viewport = proxy.getViewport({ scale: scale * devicePixelRatio, rotation: turned });
        canvas.width = viewport.width;
        canvas.height = viewport.height;
        canvas.style.width = `${width}px`;
        canvas.style.height = `${natural.height * scale}px`;
        const task = proxy.render({ canvas, viewport });
        stop = () => task.cancel();
        await task.promise;
      };
      const done = render().catch((error: unknown) => {
        if (!cancelled) throw error;
      });
      return {
        done,
        cancel: () => {
          cancelled = true;
          stop();
        },
      };
    },
    close: () => void loading.destroy(),
  };
}
