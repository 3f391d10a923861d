package steelyard.harness.forecast;

import java.io.BufferedWriter;
import java.io.IOException;
import java.math.BigDecimal;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import steelyard.harness.record.Csv;

/** Writes {@code plays.csv}: a row for each play, flushed at once, so that a killed forecast leaves what it had. */
final class PlayRows implements AutoCloseable {
    /** Columns before those of the figures. */
    static final List<String> FIRST = List.of("play", "seed", "fit");

    private final BufferedWriter out;
    private boolean headed;

    PlayRows(Path file) throws IOException {
        out = Files.newBufferedWriter(file, StandardCharsets.UTF_8);
    }

    void write(Play play) throws IOException {
        StringBuilder row = new StringBuilder();
        if (!headed) {
            headed = true;
            row.append(String.join(",", FIRST));
            titles(play.figures()).forEach(title -> Csv.field(row.append(','), title));
            row.append('\n');
        }
        row.append(play.number()).append(',').append(play.seed()).append(',').append(play.fit());
        for (int figure = 0; figure < play.figures().size(); figure++) {
            row.append(',').append(field(play, figure));
        }
        out.append(row).append('\n');
        out.flush();
    }

    /** Names of the columns; where two would be the same, the later ones get a number. */
    static List<String> titles(List<Figure> figures) {
        Set<String> taken = new HashSet<>();
        List<String> titles = new ArrayList<>();
        for (Figure figure : figures) {
            String title = figure.title();
            for (int number = 2; !taken.add(title); number++) {
                title = figure.title() + " (" + number + ")";
            }
            titles.add(title);
        }
        return titles;
    }

    private static String field(Play play, int figure) {
        BigDecimal value = Digits.of(play.figures().get(figure).unit(), play.value(figure));
        if (value != null) {
            return value.toPlainString();
        }
        Play.Gap gap = play.gap(figure);
        return gap == null ? "" : gap.word();
    }

    @Override
    public void close() throws IOException {
        out.close();
    }
}
