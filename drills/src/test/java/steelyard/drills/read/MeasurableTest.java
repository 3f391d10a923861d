package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Expectations that no play could measure, and those that hold in every play, one by one. */
class MeasurableTest {
    private static final String DRILL = """
            drill: D
            about: What can be measured.
            stage:
              hosts: {quay: {zone: north}, pier: {zone: south}}
              pools:
                seats:
                  method: weighted-round-robin
                  probe: {path: /afloat}
                  serves: {workers: 2, time: 9ms}
                  backends: {fulmar: {host: quay}, gannet: {host: pier}}
                cargo:
                  method: stride
                  serves: {workers: 2, time: 9ms}
                  backends: {skua: {host: pier, serves: {probe-work: queued}}, tern: {host: pier}}
                mail:
                  method: stride
                  serves: {workers: 2, time: 9ms}
                  backends: {auk: {host: quay}, teal: {host: quay}}
            traffic: [{to: seats, rate: 10/s}, {to: cargo, rate: 10/s}]
            lasts: 60s
            cues:
              - {at: 10s, kill: fulmar, as: dies}
              - {at: 20s, revive: fulmar, as: returns}
              - {at: 20500ms, reweigh: gannet, weight: 2, as: turns}
              - {at: 30s, fail: gannet, share: 50%, as: errs}
              - {at: 31s, fail: gannet, share: 50%, probes: true, as: errs loudly}
              - {at: 32s, kill: skua, as: skua dies}
              - {at: 33s, surge: seats, factor: 2, as: more}
              - {at: 35s, withdraw: tern, as: leaves}
              - {at: 59500ms, reweigh: fulmar, weight: 3, as: late}
            expect:
              - EXPECTATION
            """;

    private static List<String> said(String expectation) {
        String text = DRILL.replace("EXPECTATION", "{" + expectation.replace(';', ',') + "}");
        return DrillReader.read("d", text).problems().stream()
                .map(Problem::message)
                .filter(message -> !message.equals("no traffic goes to pool 'mail'"))
                .toList();
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "measure: detected-in; after: skua dies; at-most: 3s | pool 'cargo' has no probe",
                "measure: detected-in; after: errs; at-most: 3s | probes do not see fail",
                "measure: detected-in; of: fulmar; after: more; at-most: 3s | probes do not see surge",
                "measure: detected-in; after: dies; until: warming; at-most: 3s | pool 'seats' has no warm-up",
                "measure: drained-in; after: leaves; at-most: 3s | 'leaves' is no drain",
                "measure: settled-in; after: returns; at-most: 3s | 'turns' comes only 500ms after the cue",
                "measure: settled-in; after: late; at-most: 3s | the end of the play comes only 500ms after the cue",
                "measure: shifted-in; of: [fulmar; gannet]; after: dies; at-most: 3s | all attempts of the pool go to its"
                        + " own backends",
                "measure: share; of: [fulmar; skua]; at-most: 3% | the backends are of several pools",
                "measure: share; of: auk; at-most: 3% | no traffic goes to pool 'mail'",
                "measure: failed; of: {pool: mail}; at-most: 3% | no traffic goes to pool 'mail'"
            })
    void read_ofAnExpectationThatNoPlayCanMeasure_isAProblem(String expectation, String why) {
        String measure = expectation.substring("measure: ".length(), expectation.indexOf(';'));
        assertThat(said(expectation)).containsExactly(measure + " can never be measured: " + why);
    }

    @ParameterizedTest
    @CsvSource(
            delimiter = '|',
            value = {
                "measure: share; of: {pool: seats}; at-most: 3% | share is always 100 %, since it names the whole pool",
                "measure: fairness; of: fulmar; at-least: 0.9 | fairness is always 1 for a single backend",
                "measure: retry-load; of: {pool: seats}; at-most: 2 | retry-load is always 1 in a pool without retry",
                "measure: cut; of: fulmar; at-most: 0 | cut is always 0 without a drain cue"
            })
    void read_ofAnExpectationThatAlwaysHolds_isANotice(String expectation, String notice) {
        assertThat(said(expectation)).containsExactly(notice);
    }

    @ParameterizedTest
    @CsvSource({
        "measure: detected-in; after: dies; at-most: 9s",
        "measure: detected-in; after: errs loudly; at-most: 9s",
        "measure: detected-in; after: leaves; at-most: 1s",
        "measure: detected-in; of: fulmar; after: returns; until: up; at-most: 9s",
        "measure: settled-in; after: dies; at-most: 9s",
        "measure: shifted-in; after: dies; at-most: 9s",
        "measure: share; of: {host: pier}; at-most: 90%",
        "measure: share; of: {zone: north}; at-most: 90%",
        "measure: standing-changes; of: auk; at-most: 0",
        "measure: fairness; of: {pool: cargo}; at-least: 0.9"
    })
    void read_ofAnExpectationThatAPlayDecides_isLeftAlone(String expectation) {
        assertThat(said(expectation)).isEmpty();
    }

    @Test
    void read_ofAMeasureFromASurge_asksWhoIsLookedAt() {
        assertThat(said("measure: shifted-in; after: more; at-most: 3s")).containsExactly("shifted-in needs 'of'");
    }
}
