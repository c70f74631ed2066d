import { readCase } from '../case/read-case.ts';
import { readDrawing } from '../importers/registry.ts';
import { givenFiles } from '../run/given-files.ts';
import { serveThread } from '../run/serve-thread.ts';
import { caseView } from './case-view.ts';
import { drawingView } from './drawing-view.ts';
import type { ReadingJob, ReadingResult } from './reading.ts';

/** Start of the thread that reads cases and drawings for the service. */
serveThread<ReadingJob, ReadingResult>((job) => {
  switch (job.kind) {
    case 'case': {
      const { text, file, files } = job.given;
      const theCase = readCase(text, { ...(file !== undefined && { file }), readFile: givenFiles(files) });
      return { result: { kind: 'case', view: caseView(theCase) }, buffers: [] };
    }
    case 'drawing':
      return {
        result: { kind: 'drawing', view: drawingView(readDrawing(job.svg, job.name)) },
        buffers: [],
      };
  }
});
