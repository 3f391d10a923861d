package steelyard.harness.tune;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class DrillTextTest {
    private static final String DRILL = """
            drill: Two pools
            about: Seats and cargo. # a remark with every: 1s
            stage:
              pools:
                seats:
                  method: round-robin
                  probe: {path: /afloat, every: 1s, misses: 3}
                  warm-up: 5s
                  serves:
                    workers: 8
                    time: 12ms
                  backends:
                    fulmar: {weight: 1}
                    gannet.old:
                cargo:
                  method: round-robin
                  probe:
                    path: /afloat
                    every: 2s
                  serves: {workers: 4, time: 12ms}
                  backends:
                    skua:
            traffic:
              - {to: seats, rate: 300/s, requests: [{get: /}]}
              - to: cargo
                rate: 200/s
                requests: [{get: /}]
            lasts: 60s
            cues:
              - {at: 15s, kill: fulmar, as: fulmar dies}
              - {at: 20s, kill: skua, as: skua dies}
            """;

    private static String with(String path, String value) throws TuneRefused {
        return new DrillText(DRILL).with(path, value);
    }

    private static String replaced(String... pairs) {
        String text = DRILL;
        for (int at = 0; at < pairs.length; at += 2) {
            assertThat(text).contains(pairs[at]);
            text = text.replace(pairs[at], pairs[at + 1]);
        }
        return text;
    }

    @Test
    void with_keyOfPools_changesItInEveryPoolThatHasItsMap() throws TuneRefused {
        assertThat(with("probe.every", "500ms"))
                .isEqualTo(replaced("every: 1s, ", "every: 500ms, ", "every: 2s", "every: 500ms"));
    }

    @Test
    void with_keyThatOneMapLacks_addsItThere() throws TuneRefused {
        assertThat(with("probe.misses", "5"))
                .isEqualTo(replaced(
                        "misses: 3",
                        "misses: 5",
                        "        path: /afloat\n",
                        "        misses: 5\n        path: /afloat\n"));
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', textBlock = """
            seats.probe.every             | 5s   | every: 1s,      | every: 5s,
            stage.pools.seats.probe.every | 5s   | every: 1s,      | every: 5s,
            cargo.probe.every             | 5s   | every: 2s       | every: 5s
            seats.serves.workers          | 2    | workers: 8      | workers: 2
            fulmar.weight                 | 3    | weight: 1       | weight: 3
            seats.backends.fulmar.weight  | 3    | weight: 1       | weight: 3
            gannet.old.weight             | 3    | gannet.old:     | 'gannet.old: {weight: 3}'
            skua.weight                   | 3    | skua:           | 'skua: {weight: 3}'
            seats.warm-up                 | 9s   | warm-up: 5s     | warm-up: 9s
            fulmar.host                   | quay | {weight: 1}     | '{host: quay, weight: 1}'
            lasts                         | 90s  | lasts: 60s      | lasts: 90s
            traffic.seats.rate            | 1/s  | 300/s           | 1/s
            traffic.2.rate                | 1/s  | 200/s           | 1/s
            cues.skua dies.at             | 30s  | at: 20s         | at: 30s
            """)
    void with_pathToOnePlace_changesThatPlaceAlone(String path, String value, String from, String to)
            throws TuneRefused {
        String expected =
                path.contains("skua.weight") ? replaced("        skua:", "        " + to) : replaced(from, to);
        assertThat(with(path, value)).isEqualTo(expected);
    }

    @Test
    void with_pathThroughAList_changesEveryItem() throws TuneRefused {
        assertThat(with("traffic.rate", "50/s")).isEqualTo(replaced("300/s", "50/s", "200/s", "50/s"));
    }

    @Test
    void with_valueThatIsAMap_takesThePlaceOfAWholeBlock() throws TuneRefused {
        assertThat(with("cargo.probe", "{path: /, every: 3s}"))
                .isEqualTo(replaced("        path: /afloat\n        every: 2s\n", "        {path: /, every: 3s}\n"));
    }

    @Test
    void with_textBeyondTheBasicPlane_changesTheRightPlace() throws TuneRefused {
        String text = "drill: \"\\U0001F6A2 and 🚢\"\nstage: {pools: {seats: {probe: {every: 1s}}}}\n";
        assertThat(new DrillText(text).with("probe.every", "2s")).isEqualTo(text.replace("1s", "2s"));
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', textBlock = """
            prob.every            | 1s     | no 'prob' is written in this drill where the path leads; did you mean 'probe'?
            seat.probe.every      | 1s     | no 'seat' is written in this drill where the path leads; did you mean 'seats'?
            seats.prob.every      | 1s     | no 'prob' is written in this drill where the path leads; did you mean 'probe'?
            retry.budget          | 20%    | no 'retry' is written in this drill
            serves.time.fixed     | 1ms    | 'time' is written as a single value; write it as a map, with 'fixed' in it
            warm-up.ramp          | 1s     | 'warm-up' is written as a single value
            drill                 | other  | 'drill' is no setting of the stage or its traffic
            expect.1.at-most      | 1%     | 'expect' is no setting of the stage or its traffic
            seats                 | 1      | names no setting; write which of its settings
            traffic.3.rate        | 1/s    | there is no item 3; the list has 2
            traffic.99999999.rate | 1/s    | there is no item 99999999
            probe.every           | 1s}    | '1s}' is not one value of a drill
            probe.every           | 1s #   | '1s #' is not one value of a drill
            probe.a key           | 1s     | 'a key' cannot be a key of a drill
            """)
    void with_pathOrValueThatIsWrong_saysWhatWasProbablyMeant(String path, String value, String message) {
        assertThatThrownBy(() -> with(path, value))
                .isInstanceOf(TuneRefused.class)
                .hasMessageStartingWith("--vary " + path)
                .hasMessageContaining(message)
                .hasMessageNotContaining("\n");
    }

    @Test
    void with_settingSharedByAnAlias_changesItForAllButNotForOne() throws TuneRefused {
        String text = """
                stage:
                  pools:
                    seats: {probe: &common {every: 1s}, backends: {fulmar: }}
                    cargo: {probe: *common, backends: {skua: }}
                """;
        DrillText shared = new DrillText(text);
        assertThat(shared.with("probe.every", "2s")).isEqualTo(text.replace("1s", "2s"));
        assertThatThrownBy(() -> shared.with("cargo.probe.every", "2s"))
                .isInstanceOf(TuneRefused.class)
                .hasMessageContaining("an alias shares this setting with another place");
        assertThat(shared.with("cargo.method", "stride"))
                .isEqualTo(text.replace("cargo: {", "cargo: {method: stride, "));
    }

    @Test
    void with_valueBehindAnAnchor_keepsTheAnchor() throws TuneRefused {
        String text = "stage: {pools: {seats: {probe: {every: &e 1s}, drain: {limit: *e}}}}\n";
        assertThat(new DrillText(text).with("probe.every", "2s")).isEqualTo(text.replace("1s", "2s"));
    }
}
