/** The forms that a report of a check can be written in. */
export const REPORT_FORMS = ["text", "json", "sarif", "junit", "markdown", "annotations"] as const;

export type ReportForm = (typeof REPORT_FORMS)[number];
