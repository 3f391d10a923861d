/**
 * The report looked at in a browser.
 *
 * <p>Purpose: pages are made from invented run folders and opened in headless Chromium at several widths and in both
 * colour schemes. Allowed dependencies: the report, Jackson, Selenium. Thread rule: one browser a test class, on its
 * thread. First class to read: {@link steelyard.browser.ReportPageTest}.
 */
@NullMarked
package steelyard.browser;

import org.jspecify.annotations.NullMarked;
