package steelyard.drills.read;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.fail;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Spoils valid drills at random, from fixed seeds; whatever comes of it, the reader answers and does not throw. */
class DrillReaderFuzzTest {
    private static final int ROUNDS = 7_000;

    private static final List<String> SCRAPS = List.of(
            "\t",
            ":",
            "{",
            "}",
            "[",
            "]",
            "'",
            "\"",
            "&a ",
            "*a",
            "!",
            "|",
            ">",
            "%",
            "---",
            "...",
            "? ",
            "- ",
            "#",
            ",",
            "~",
            "null",
            "-1",
            "0",
            "1e9",
            "99999999999999999999",
            ".",
            "15",
            "15s",
            "-5s",
            "0%",
            "200%",
            "/s",
            "\0",
            "\u0085",
            "\ufeff",
            "\ud83d",
            "\\x",
            "\"\\0\"",
            "\"\\U99999999\"",
            "!!int x",
            "<<: ",
            "fulmar",
            "{pool: seats}",
            "times: 1000000",
            "every: 24h",
            "weight: 0",
            "+",
            "- 1s",
            "{}",
            "[]",
            "9999999h",
            "as: a",
            "at: a + 1s");

    private static List<String> seeds() {
        List<String> texts = new ArrayList<>(List.of(EveryKeyTest.TEXT));
        DrillLibrary.names().forEach(name -> texts.add(DrillLibrary.text(name).orElseThrow()));
        return texts;
    }

    @ParameterizedTest
    @ValueSource(longs = {1, 2, 3})
    void read_ofASpoiledDrill_neverThrows(long seed) {
        Random random = new Random(seed);
        List<String> texts = seeds();
        int refused = 0;
        for (int round = 0; round < ROUNDS; round++) {
            String text = texts.get(random.nextInt(texts.size()));
            for (int i = random.nextInt(4); i >= 0; i--) {
                text = spoil(text, random);
            }
            refused += outcome(text, seed, round).value().isEmpty() ? 1 : 0;
        }
        assertThat(refused).as("both outcomes occur").isBetween(ROUNDS / 4, ROUNDS - ROUNDS / 50);
    }

    private static Parsed<?> outcome(String text, long seed, int round) {
        try {
            Parsed<?> parsed = DrillReader.read("spoiled", text, EveryKeyTest.FOLDER);
            for (Problem problem : parsed.problems()) {
                assertThat(problem.line()).isBetween(1, text.length() + 1);
                assertThat(problem.column()).isPositive();
                assertThat(problem.toString().codePoints()).noneMatch(Character::isISOControl);
            }
            return parsed;
        } catch (RuntimeException | StackOverflowError e) {
            return fail("seed " + seed + ", round " + round + ":\n" + text, e);
        }
    }

    private static String spoil(String text, Random random) {
        int at = random.nextInt(text.length() + 1);
        int end = Math.min(text.length(), at + 1 + random.nextInt(12));
        String head = text.substring(0, at);
        if (text.isEmpty()) {
            return scrap(random);
        }
        return switch (random.nextInt(6)) {
            case 0 -> head + text.substring(end);
            case 1 -> head + scrap(random) + text.substring(at);
            case 2 -> head + scrap(random) + text.substring(end);
            case 3 -> head + text.substring(at, end) + text.substring(at);
            case 4 -> swapLines(text, random);
            default -> swapWords(text, random);
        };
    }

    private static String scrap(Random random) {
        return SCRAPS.get(random.nextInt(SCRAPS.size()));
    }

    private static String swapLines(String text, Random random) {
        String[] lines = text.split("\n", -1);
        int one = random.nextInt(lines.length);
        int other = random.nextInt(lines.length);
        String line = lines[one];
        lines[one] = lines[other];
        lines[other] = line;
        return String.join("\n", lines);
    }

    /** Puts a word of the drill where another one stood: shape and units stay right, meanings do not. */
    private static String swapWords(String text, Random random) {
        int at = random.nextInt(text.length());
        int from = random.nextInt(text.length());
        String word = text.substring(edge(text, from, -1), edge(text, from, 1));
        return text.substring(0, edge(text, at, -1)) + word + text.substring(edge(text, at, 1));
    }

    private static int edge(String text, int from, int step) {
        int at = from;
        while (at > 0 && at < text.length() && " :,{}[]\n".indexOf(text.charAt(step < 0 ? at - 1 : at)) < 0) {
            at += step;
        }
        return at;
    }
}
