package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Drills that can be played, but may not say what was meant: each gives its notice, at its place, and no other. */
class NoticesTest {
    private static final String TEXT = """
            drill: Notices
            about: A drill with one line to change.
            stage:
              pools:
                seats:
                  method: weighted-round-robin
                  probe: {path: /afloat, every: 1s}
                  serves: {workers: 2, time: 9ms}
                  backends: {fulmar: {weight: 1}, gannet: {weight: 1}}
            traffic:
              - {to: seats, rate: 10/s}
            lasts: 30s
            cues:
              - {at: 5s, kill: fulmar, as: dies}
              - {at: 9s, revive: fulmar}
            expect:
              - {measure: failed, at-most: 1%}
            """;

    @Test
    void read_ofTheTextItself_givesNone() {
        assertThat(DrillReader.read("d", TEXT).problems()).isEmpty();
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', quoteCharacter = '"', textBlock = """
                    {weight: 1} | {weight: 0} | d:9:27: notice: every backend of the pool has weight 0, so none takes work
                    every: 1s} | every: 1s, within: 2s} | d:7:41: notice: a probe may take 2s, longer than from one to the next
                    every: 1s} | every: 300ms} | d:7:30: notice: a probe may take 400ms, longer than from one to the next
                    rate: 10/s} | steps: [{for: 9s, rate: 1/s}, {for: 11s, rate: 2/s}]} | d:11:17: notice: the steps end at 20s, before the play does: the last rate holds on
                    rate: 10/s} | rate: 10/s, requests: [{get: /x, good: [503]}]} | d:11:40: notice: no answer to '/x' could be good
                    rate: 10/s} | rate: 10/s, requests: [{get: /x, good: [404]}]} | d:11:40: notice: no answer to '/x' could be good
                    kill: fulmar, | kill: [fulmar, fulmar], | d:14:29: notice: 'fulmar' is named twice; keep one
                    as: dies | as: dies, for: 26s | d:14:5: notice: 'dies' would end at 31s, after the end of the play; leave out for, or write at most 25s
                    kill: fulmar, as: dies | surge: {pool: seats}, factor: 0, as: dies | d:14:5: notice: a surge with factor 0 silences the traffic
                    kill: fulmar, as | kill: gannet, as | d:15:5: notice: revive does nothing: 'fulmar' is not killed before it
                    at: 9s, revive | at: 4s, revive | d:15:5: notice: revive does nothing: 'fulmar' is not killed before it
                    at: 9s, revive | at: 9s, admit | d:15:5: notice: admit does nothing: 'fulmar' is not drained or withdrawn before it
                    """)
    void read_ofAnOddDrill_givesTheNotice(String text, String odd, String notice) {
        Parsed<?> parsed = DrillReader.read("d", TEXT.replace(text, odd));
        assertThat(parsed.ok()).isTrue();
        assertThat(parsed.problems().stream().map(Problem::toString))
                .isNotEmpty()
                .anySatisfy(line -> assertThat(line).startsWith(notice))
                .allSatisfy(line -> assertThat(line.contains("revive does nothing") || line.startsWith(notice))
                        .isTrue());
    }

    @Test
    void read_ofACapBelowOneBackend_givesTheNotice() {
        // Of two backends 49 % are none, and 50 % are one.
        assertThat(DrillReader.read("d", withBench("49%")).problems().stream().map(Problem::toString))
                .containsExactly(
                        "d:7:14: notice: none is ever benched, since cap is less than one of the pool's 2 backends;"
                                + " write a larger cap, at least 50%");
        assertThat(DrillReader.read("d", withBench("50%")).problems()).isEmpty();
    }

    private static String withBench(String cap) {
        return TEXT.replace("      probe:", "      bench: {cap: " + cap + "}\n      probe:");
    }

    @Test
    void read_ofGoodThatTheBackendsAnswer_givesNone() {
        String text = TEXT.replace("rate: 10/s}", "rate: 10/s, requests: [{get: /x, good: [200, 503]}]}");
        assertThat(DrillReader.read("d", text).problems()).isEmpty();
    }

    @Test
    void readCue_thatRevivesWhatNobodyKilledYet_givesNone() {
        var drill = DrillReader.read("d", TEXT).value().orElseThrow();
        assertThat(DrillReader.readCue("revive: gannet", drill).problems()).isEmpty();
    }
}
