import type { RateEntry, StudyContent } from '$lib/contracts/content';
import type { StudyQuestion } from '$lib/contracts/study';
import type { Change } from '$lib/contracts/views';
import { canonicalJson, displayUnit, formatNumber, listWords, rateNeed, timeNames } from '$lib/study';

interface Text {
  question: StudyQuestion;
  content: StudyContent;
}

/** One comparable thing: where it is, what it is called, and how it reads. */
interface Item {
  path: string;
  label: string;
  reads: string;
  /** Everything that counts as a difference, also what `reads` leaves out. */
  whole: unknown;
}

const quoted = (text: string) => (text.length > 60 ? `“${text.slice(0, 57)}…”` : `“${text}”`);

function questionItems({ question }: Text): Item[] {
  const item = (path: string, label: string, reads: string): Item => ({
    path: `question.${path}`,
    label,
    reads,
    whole: reads
  });
  const species = (key: 'first' | 'second', which: string) => {
    const { common, scientific, counted, unit } = question[key];
    return [
      item(`${key}.common`, `Name of the ${which} species`, quoted(common)),
      item(`${key}.scientific`, `Scientific name of the ${which} species`, quoted(scientific)),
      item(`${key}.counted`, `What is counted of ${common}`, quoted(counted)),
      item(`${key}.unit`, `Unit of ${common}`, displayUnit(unit).text)
    ];
  };
  return [
    item('title', 'Title', quoted(question.title)),
    item('place', 'Place', quoted(question.place)),
    item('area', 'Area', `${formatNumber(question.area.value, 6)} ${displayUnit(question.area.unit).text}`),
    item('interaction', 'Interaction', question.interaction),
    ...species('first', 'first'),
    ...species('second', 'second'),
    item('protects', 'Whose persistence counts', question.protects),
    item('timeUnit', 'Time unit', timeNames[question.timeUnit].one),
    item('horizon', 'Horizon', `${formatNumber(question.horizon, 6)} ${timeNames[question.timeUnit].many}`),
    { ...item('objective', 'Objective', quoted(question.objective)), whole: question.objective },
    item('acceptableRisk', 'Acceptable risk', `${formatNumber(question.acceptableRisk)} in 100`)
  ];
}

function uncertaintyReads({ uncertainty, unit }: RateEntry): string {
  if (uncertainty.kind === 'se') return ` ± ${formatNumber(uncertainty.se)} ${displayUnit(unit).text}`;
  if (uncertainty.kind === 'cv') return ` ${displayUnit(unit).text}, CV ${formatNumber(uncertainty.percent)} %`;
  if (uncertainty.kind === 'range') {
    return ` (${formatNumber(uncertainty.low)} to ${formatNumber(uncertainty.high)}) ${displayUnit(unit).text}`;
  }
  return ` ${displayUnit(unit).text}, exact`;
}

/** A rate as one line: `0.678 yr⁻¹, CV 26 %`. */
export function rateReads(entry: RateEntry): string {
  const form = entry.form === 'crowding' ? ' (crowding form)' : '';
  return `${formatNumber(entry.value, 6)}${uncertaintyReads(entry)}${form}`.replace(/\s+,/g, ',').trim();
}

function contentItems({ question, content }: Text): Item[] {
  const { structure, run } = content;
  const per = timeNames[question.timeUnit].many;
  const yes = (on: boolean) => (on ? 'yes' : 'no');
  const term = (path: string, label: string, reads: string): Item => ({
    path: `structure.${path}`,
    label,
    reads,
    whole: reads
  });
  const named = (key: 'first' | 'second') => question[key].common;
  const managed = (key: 'first' | 'second') => [
    term(`${key}.effort`, `Removal by effort of ${named(key)}`, yes(structure[key].effort)),
    term(`${key}.quota`, `Quota on ${named(key)}`, yes(structure[key].quota)),
    term(`${key}.stocking`, `Stocking of ${named(key)}`, yes(structure[key].stocking))
  ];
  const feeding =
    structure.interaction === 'consumer-resource'
      ? [
          term('feeding.response', 'Feeding response', structure.feeding.response),
          term('feeding.interference', 'Interference', yes(structure.feeding.interference)),
          term('second.selfLimitation', `Self-limitation of ${named('second')}`, yes(structure.second.selfLimitation))
        ]
      : [term('competition', 'Form of competition', structure.competition)];
  return [
    term('interaction', 'Model of the interaction', structure.interaction),
    term('first.growth', `Growth of ${named('first')}`, structure.first.growth),
    term('second.growth', `Growth of ${named('second')}`, structure.second.growth),
    ...managed('first'),
    ...managed('second'),
    ...feeding,
    ...content.rates.map((entry) => {
      const need = rateNeed(entry.path, structure, question);
      return {
        path: `rates.${entry.path}`,
        label: `${need.symbol.plain} (${need.name})`,
        reads: rateReads(entry),
        whole: entry
      };
    }),
    ...content.starts.map((start, index) => ({
      path: `starts.${index}`,
      label: index === 0 ? `Today’s counts (${start.label})` : `Start ${index + 1} (${start.label})`,
      reads: `${formatNumber(start.x)} and ${formatNumber(start.y)}`,
      whole: start
    })),
    { path: 'run.span', label: 'Length of the run', reads: `${formatNumber(run.span)} ${per}`, whole: run.span },
    { path: 'run.samples', label: 'Output times', reads: String(run.samples), whole: run.samples },
    { path: 'run.rtol', label: 'Relative tolerance', reads: formatNumber(run.rtol), whole: run.rtol },
    { path: 'run.atol', label: 'Absolute tolerance', reads: formatNumber(run.atol), whole: run.atol },
    {
      path: 'run.thresholds',
      label: 'Thresholds',
      reads:
        listWords(run.thresholds.map(({ species, below }) => `${named(species)} below ${formatNumber(below)}`)) ||
        'none',
      whole: run.thresholds
    },
    ...content.assumptions.map((assumption) => ({
      path: `assumptions.${assumption.key}`,
      label: `Assumption “${assumption.key}”`,
      reads: `${assumption.accepted ? 'accepted' : 'not accepted'}${assumption.comment ? `, ${quoted(assumption.comment)}` : ''}`,
      whole: assumption
    }))
  ];
}

/** Everything that differs between two texts of a study, in the order of its pages. */
export function changesBetween(before: Text, after: Text): Change[] {
  const old = new Map([...questionItems(before), ...contentItems(before)].map((item) => [item.path, item]));
  const changes: Change[] = [];
  for (const item of [...questionItems(after), ...contentItems(after)]) {
    const was = old.get(item.path);
    old.delete(item.path);
    if (was && canonicalJson(was.whole) === canonicalJson(item.whole)) continue;
    // The number is the same and something behind it is not: say so rather than "0.5, now 0.5".
    const behind = was?.reads === item.reads;
    changes.push({
      path: item.path,
      label: item.label,
      before: was?.reads ?? null,
      after: behind ? `${item.reads}; source or note changed` : item.reads
    });
  }
  for (const gone of old.values()) {
    changes.push({ path: gone.path, label: gone.label, before: gone.reads, after: null });
  }
  return changes;
}

/** The changes in one sentence: at most three are told, the rest counted. */
export function summaryOf(changes: readonly Change[]): string {
  const told = changes.slice(0, 3).map(({ label, before, after }) => {
    if (before === null) return `${label} entered as ${after}`;
    if (after === null) return `${label} removed, was ${before}`;
    return `${label} ${before}, now ${after}`;
  });
  const rest = changes.length - told.length;
  if (rest > 0) told.push(`${rest} more ${rest === 1 ? 'change' : 'changes'}`);
  return `${told.join('; ')}.`;
}
