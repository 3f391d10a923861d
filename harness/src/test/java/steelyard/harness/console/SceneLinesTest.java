package steelyard.harness.console;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import org.jline.utils.AttributedCharSequence.ForceMode;
import org.jline.utils.AttributedString;
import org.junit.jupiter.api.Test;
import steelyard.drills.model.Cause;
import steelyard.drills.model.Cue;
import steelyard.drills.model.Drill;
import steelyard.harness.record.PlayBoard;

class SceneLinesTest {
    private static final String RED = "38;5;160m";

    private final Drill three = Boards.drill("Lose one of three", List.of("fulmar", "gannet", "petrel"));

    private static List<AttributedString> lines(
            Drill drill, Map<Cause, Long> failures, int width, int height, Colours colours) {
        return new SceneLines(width, height, colours).of(Scene.of(drill, Boards.figures(drill, failures)));
    }

    private static List<String> text(List<AttributedString> lines) {
        return lines.stream().map(line -> line.toString().stripTrailing()).toList();
    }

    @Test
    void scene_withRoom_showsEverythingInOrder() {
        assertThat(text(lines(three, Map.of(Cause.RESET, 23L, Cause.REFUSED, 8L), 79, 23, Colours.SOME)))
                .containsExactly(
                        "Lose one of three",
                        "20.0 s of 60.0 s  [=============                           ]",
                        "played  15.0 s  kill fulmar (the first dies)",
                        "now     kill fulmar (the first dies)",
                        "next    35.0 s  revive fulmar",
                        "rate    893/s, 15,412 good so far",
                        "failed  31 (0.2 %)  reset 23, refused 8",
                        "",
                        "backend  standing   weight   share  in flight",
                        "fulmar   down          0.3   0.4 %          0",
                        "gannet   up              1    50 %      1,234",
                        "petrel   up              1    50 %      1,234",
                        "",
                        "Ctrl-C ends the play and writes the run.");
    }

    @Test
    void scene_onFortyColumns_leavesOutTheWeightFirst() {
        assertThat(text(lines(three, Map.of(), 39, 23, Colours.SOME)))
                .contains("backend  standing    share  in flight", "fulmar   down        0.4 %          0");
    }

    @Test
    void scene_onAnySize_staysInsideIt() {
        List<String> many = IntStream.range(1, 40)
                .mapToObj(number -> "a-backend-with-a-name-" + number)
                .toList();
        for (Drill drill : List.of(three, Boards.drill("渡し船の予約 at the evening peak", many))) {
            for (int width = 1; width <= 130; width++) {
                for (int height = 1; height <= 60; height += 3) {
                    List<AttributedString> lines = lines(drill, Boards.everyCause(), width, height, Colours.SOME);
                    assertThat(lines).hasSizeBetween(1, height);
                    int most = width;
                    assertThat(lines).allMatch(line -> line.columnLength() <= most);
                }
            }
        }
    }

    @Test
    void backends_thatDoNotFit_areCountedByStanding() {
        List<String> names =
                IntStream.range(1, 21).mapToObj(number -> "gull-" + number).toList();
        List<String> text = text(lines(Boards.drill("Many", names), Map.of(), 79, 12, Colours.SOME));
        assertThat(text).hasSize(12).contains("gull-3   up              1    50 %      1,234");
        assertThat(text.get(11)).isEqualTo("and 17 more: 17 up");
    }

    @Test
    void backends_onAVeryLowTerminal_areCountedInALine() {
        List<String> text = text(lines(three, Map.of(Cause.RESET, 1L), 79, 5, Colours.SOME));
        assertThat(text)
                .containsExactly(
                        "Lose one of three",
                        "20.0 s of 60.0 s  [=============                           ]",
                        "rate    893/s, 15,412 good so far",
                        "failed  1 (0.0065 %)  reset 1",
                        "3 backends: 1 down, 2 up");
    }

    @Test
    void traffic_onceItHasEnded_hasNoRateButWhatIsOpen() {
        PlayBoard.Figures at = Boards.figures(three, Map.of(Cause.RESET, 88L));
        PlayBoard.Figures last = new PlayBoard.Figures(
                60 * Boards.SECOND,
                false,
                at.offered(),
                at.good(),
                at.failedBy(),
                at.offeredLastSecond(),
                at.failedLastSecond(),
                0,
                0,
                at.backends(),
                at.lastCue());

        // 20,000 - 15,412 - 88 have no end yet.
        assertThat(text(new SceneLines(79, 23, Colours.SOME).of(Scene.of(three, last))))
                .contains("rate    20,000 offered, 4,500 open, 15,412 good so far");
    }

    @Test
    void cue_thatEnds_isNextByNameAndGoesOnUntilThen() {
        Drill drill = Boards.drill(
                "Brown out",
                List.of("fulmar", "gannet"),
                "{at: 15s, slow: fulmar, factor: 8, for: 20s, as: brown out}");
        assertThat(text(lines(drill, Map.of(), 79, 23, Colours.SOME)))
                .contains("now     slow fulmar (brown out)", "next    35.0 s  brown out ends");
    }

    @Test
    void inForce_atEachInstant_isWhatBeganAndWasNotUndone() {
        List<Cue> cues = three.cues();
        assertThat(InForce.at(14 * Boards.SECOND, cues)).isEmpty();
        assertThat(InForce.at(15 * Boards.SECOND, cues)).containsExactly(cues.get(0));
        assertThat(InForce.at(35 * Boards.SECOND, cues)).isEmpty();
    }

    @Test
    void inForce_ofTwoOfOneKind_isTheLaterOne() {
        List<Cue> cues = Boards.drill(
                        "Twice",
                        List.of("fulmar", "gannet"),
                        "{at: 15s, slow: fulmar, factor: 3, for: 20s}",
                        "{at: 15s, slow: gannet, factor: 3, for: 20s}",
                        "{at: 20s, slow: fulmar, factor: 8}",
                        "{at: 25s, load: gannet, gauge: cpu, to: 90%}",
                        "{at: 26s, load: gannet, gauge: cpu, to: 80%}")
                .cues();
        assertThat(InForce.at(19 * Boards.SECOND, cues)).containsExactly(cues.get(0), cues.get(1));
        assertThat(InForce.at(40 * Boards.SECOND, cues)).containsExactly(cues.get(2), cues.get(4));
    }

    @Test
    void red_always_marksFailuresAlone() {
        List<AttributedString> without = lines(three, Map.of(), 79, 23, Colours.SOME);
        assertThat(without).noneMatch(line -> ansi(line).contains(RED));
        List<AttributedString> with = lines(three, Map.of(Cause.CUT, 1L), 79, 23, Colours.SOME);
        assertThat(with)
                .filteredOn(line -> ansi(line).contains(RED))
                .hasSize(1)
                .allMatch(line -> line.toString().startsWith("failed"));
    }

    @Test
    void colours_whenRefused_areNotUsed() {
        List<AttributedString> lines = lines(three, Boards.everyCause(), 79, 23, Colours.NONE);
        assertThat(lines).allMatch(line -> ansi(line).equals(line.toString()));
        assertThat(Colours.of(true, true)).isEqualTo(Colours.NONE);
        assertThat(Colours.of(false, false)).isEqualTo(Colours.NONE);
        assertThat(Colours.of(true, false)).isEqualTo(Colours.SOME);
    }

    private static String ansi(AttributedString line) {
        return line.toAnsi(256, ForceMode.Force256Colors);
    }
}
