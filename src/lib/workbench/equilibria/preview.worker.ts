/** The preview, off the page's own thread: one numbered question, one numbered answer. */
import { preview, type PreviewQuestion } from './preview';

self.onmessage = (event: MessageEvent<{ id: number; question: PreviewQuestion }>) => {
  const { id, question } = event.data;
  try {
    self.postMessage({ id, result: preview(question) });
  } catch (thrown) {
    self.postMessage({ id, error: thrown instanceof Error ? thrown.message : 'The preview could not be computed.' });
  }
};
