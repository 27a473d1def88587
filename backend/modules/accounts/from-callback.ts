/** Waits for a function that answers by callback, as passport and the session do. */
export const fromCallback = (start: (done: (error?: unknown) => void) => void): Promise<void> =>
  new Promise((resolve, reject) => {
    start((error) => {
      if (!error) resolve();
      else reject(error instanceof Error ? error : new Error('A callback failed.', { cause: error }));
    });
  });
