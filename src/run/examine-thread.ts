import { readCase } from '../case/read-case.ts';
import { findLayout } from './answer-layout.ts';
import { examineLayout } from './examine.ts';
import type { ExamineJob, ExamineResult } from './examine-in-thread.ts';
import { givenFiles } from './given-files.ts';
import { type Handed, serveThread, type ThreadHooks } from './serve-thread.ts';

/** Start of the thread that examines layouts: it has the larger stack that the triangulation package needs. */
serveThread(examine);

function examine(job: ExamineJob, hooks: ThreadHooks): Handed<ExamineResult> {
  const theCase = readCase(job.text, { file: job.file, readFile: givenFiles(job.files) });
  const layout = findLayout(theCase, job.layout);
  const { mesh, quality } = examineLayout(theCase, layout, { scale: job.scale, ...hooks });
  return { result: { mesh, quality }, buffers: [] };
}
