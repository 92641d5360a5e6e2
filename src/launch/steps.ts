/** Prints one line per step of a start: what is done, then how long it took. */
export interface Steps {
  /** Runs one step; `work` may return a few words to print after its time. */
  run: <T>(title: string, work: (progress: (words: string) => void) => T | Promise<T>) => Promise<T>;
  say: (line: string) => void;
}

/** Steps printed to `output`; on a terminal the line of a running step counts its seconds. */
export function createSteps(output: NodeJS.WriteStream = process.stdout): Steps {
  const lively = output.isTTY === true;
  return {
    say: (line) => void output.write(`${line}\n`),
    run: async (title, work) => {
      const begun = performance.now();
      const seconds = () => `${((performance.now() - begun) / 1000).toFixed(1)} s`;
      let words = '';
      const line = () => `  ${title} … ${words ? `${words}, ` : ''}${seconds()}`;
      const ticker = lively ? setInterval(() => output.write(`\r\u001b[K${line()}`), 200) : undefined;
      try {
        return await work((said) => (words = said));
      } finally {
        clearInterval(ticker);
        output.write(lively ? `\r\u001b[K${line()}\n` : `${line()}\n`);
      }
    },
  };
}
