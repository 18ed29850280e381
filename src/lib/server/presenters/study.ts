import type { z } from 'zod';
import type { StudyAnswer, StudyListAnswer } from '$lib/contracts/answers';
import type { StudyListView } from '../queries/studyList';
import type { StudyOverviewView } from '../queries/studyOverview';

/** The list as the API gives it: what a page draws with, such as thumbnails and filters, is left out. */
export function presentStudyList(view: StudyListView): z.input<typeof StudyListAnswer> {
  return {
    studies: view.rows.map(({ parts: _parts, sketch: _sketch, ...row }) => row),
    total: view.total,
    page: view.page,
    pages: view.pages,
    pageSize: view.pageSize
  };
}

/** One study as the API gives it. */
export function presentStudy(view: StudyOverviewView): z.input<typeof StudyAnswer> {
  const { id, state, owner, question, content, verdict, abilities } = view;
  return {
    id,
    state,
    owner,
    revision: {
      number: view.revision,
      fingerprint: view.fingerprint,
      savedAt: view.savedAt,
      author: view.savedBy,
      summary: view.summary
    },
    question,
    content,
    verdict: { kind: verdict.kind, consequence: verdict.consequence, sentence: verdict.plain },
    abilities
  };
}
