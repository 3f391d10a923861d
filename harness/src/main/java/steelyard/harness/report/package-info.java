/**
 * The report: a run folder made into one page that needs nothing else.
 *
 * <p>Purpose: {@code report.html}, read from the top: was it met; what happened when; why. Text and tables are written
 * here, so that they stand without scripts; the charts are drawn in the browser from figures inside the page. Allowed
 * dependencies: the record's reader, the drill model's words, Jackson, the chart library's files on the class path; no
 * stage, no balancer, so that a page can be made anew from an old folder. Thread rule: everything is confined to the
 * calling thread. First class to read: {@link steelyard.harness.report.Report}.
 */
@NullMarked
package steelyard.harness.report;

import org.jspecify.annotations.NullMarked;
