import { annotations } from './annotations/detect';
import { azureAnnotations } from './annotations/azure';
import { githubAnnotations } from './annotations/github';
import { gitlabReport } from './annotations/gitlab';
import { teamcityAnnotations } from './annotations/teamcity';
import { jsonReport } from './json';
import { junitReport } from './junit';
import { markdownReport } from './markdown';
import type { Writer } from './page';
import { sarifReport } from './sarif';
import { textReport } from './text';

export interface Format {
  readonly write: Writer;
  /** For the help: what it is for. */
  readonly about: string;
}

/** How a report is written, by the name that `--format` takes. */
export const formats: Readonly<Record<string, Format>> = {
  text: { write: (page) => textReport(page.report, page), about: 'for people' },
  json: { write: ({ report }) => jsonReport(report), about: 'for programs; stable' },
  sarif: { write: sarifReport, about: 'SARIF 2.1.0' },
  junit: { write: junitReport, about: 'test results, one case per claim' },
  markdown: { write: markdownReport, about: 'a comment for a code review' },
  // What typesets the equations is large, and is loaded for this format alone.
  html: { write: async (page) => (await import('./html/report')).htmlReport(page), about: 'one file, with equations, terms and curves' },
  annotations: { write: annotations, about: 'github, azure or teamcity, whichever the command runs on' },
  github: { write: githubAnnotations, about: 'workflow commands of GitHub Actions' },
  azure: { write: azureAnnotations, about: 'logging commands of Azure Pipelines' },
  teamcity: { write: teamcityAnnotations, about: 'service messages of TeamCity' },
  gitlab: { write: gitlabReport, about: 'a Code Quality report of GitLab' },
};
