import type { StudyRole } from '$lib/contracts/people';
import { layOut } from '../layout';
import type { Mail } from '../send';

const EXPECTED: Record<StudyRole, string> = {
  contributor: 'You may read it, change it and comment on it.',
  reviewer: 'Read every part of it and comment on a rate, a point or the study as a whole; you cannot change it.',
  observer: 'You may read it.'
};

/** Tells somebody who has an account that a study is now open to them. */
export function studySharedMail(facts: {
  to: string;
  sharedBy: string;
  studyId: string;
  studyTitle: string;
  role: StudyRole;
}): Mail {
  return layOut({
    to: facts.to,
    subject: facts.role === 'reviewer' ? `Review asked: ${facts.studyTitle}` : `Shared with you: ${facts.studyTitle}`,
    paragraphs: [
      facts.role === 'reviewer'
        ? `${facts.sharedBy} asks you to review the study “${facts.studyTitle}”.`
        : `${facts.sharedBy} shares the study “${facts.studyTitle}” with you as its ${facts.role}.`,
      EXPECTED[facts.role]
    ],
    link: { words: 'Open the study', path: `/studies/${facts.studyId}` },
    because: `You get this because you were named ${facts.role}; this kind of mail cannot be switched off.`
  });
}
