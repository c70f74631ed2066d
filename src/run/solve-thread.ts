import { createHash } from 'node:crypto';
import type { Case } from '../case/case.ts';
import { readCase } from '../case/read-case.ts';
import { answerLayout } from './answer-layout.ts';
import { WorkError } from './failure.ts';
import { fieldBytes } from './field-bytes.ts';
import { givenFiles } from './given-files.ts';
import { layoutView, type PlainLayoutAnswer } from './layout-view.ts';
import type { SolveJob, SolveResult } from './run-in-thread.ts';
import { type Handed, serveThread, type ThreadHooks } from './serve-thread.ts';

/** Start of the thread that solves: reads the case from its text, solves one layout, hands the arrays over. */
serveThread(solve);

function solve(job: SolveJob, hooks: ThreadHooks): Handed<SolveResult> {
  hooks.progress('reading the case', 0);
  const theCase = readCase(job.text, {
    ...(job.file !== undefined && { file: job.file }),
    readFile: givenFiles(job.files),
  });
  const answer = answerInTime(theCase, job, hooks);
  return job.wanted === 'picture' ? pictured(theCase, job, answer) : whole(answer);
}

/** Solves with the case's own limit of time; a stop by that limit says so. */
function answerInTime(theCase: Case, job: SolveJob, hooks: ThreadHooks): PlainLayoutAnswer {
  const { seconds } = theCase.accuracy;
  const end = performance.now() + seconds * 1000;
  let late = false;
  const stop = () => {
    late ||= performance.now() > end;
    return late || hooks.stop();
  };
  try {
    const { answers, mesh, domain, meanExitTime, caughtAt } = answerLayout(theCase, job.layout, {
      ...(job.starts !== undefined && { starts: job.starts }),
      stop,
      progress: hooks.progress,
      clock: () => performance.now(),
      at: job.at,
      command: job.command,
    });
    const { problem: _functions, ...plain } = domain;
    return { answers, mesh, domain: plain, meanExitTime, caughtAt };
  } catch (error) {
    if (!late) throw error;
    throw new WorkError(
      {
        kind: 'limit',
        code: 'TIME_LIMIT',
        what: `The layout "${job.layout}" was not solved within the ${seconds} s that the case allows`,
        where: { key: 'accuracy.seconds' },
        remedy: 'Raise accuracy.seconds, or ask for fewer nodes',
      },
      error,
    );
  }
}

function pictured(theCase: Case, job: SolveJob, answer: PlainLayoutAnswer): Handed<SolveResult> {
  const view = layoutView(theCase, job.layout, answer);
  const field = fieldBytes(answer.mesh.nodes, answer.mesh.triangles, answer.meanExitTime);
  const fieldHash = createHash('sha256').update(new Uint8Array(field)).digest('hex');
  return { result: { kind: 'picture', view, field, fieldHash }, buffers: [field] };
}

function whole(answer: PlainLayoutAnswer): Handed<SolveResult> {
  const { mesh } = answer;
  const arrays = [
    mesh.nodes,
    mesh.triangles,
    mesh.regionSet,
    mesh.segments,
    mesh.segmentTag,
    mesh.segmentSpan,
    mesh.segmentTwin,
    answer.meanExitTime,
    ...answer.caughtAt,
  ];
  // A view of part of a larger buffer is copied: the rest of that buffer may still be in use here.
  const buffers = new Set<ArrayBuffer>();
  for (const { buffer, byteLength } of arrays) {
    if (buffer instanceof ArrayBuffer && buffer.byteLength === byteLength) buffers.add(buffer);
  }
  return { result: { kind: 'answer', answer }, buffers: [...buffers] };
}
