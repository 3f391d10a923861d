package steelyard.harness.forecast;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import steelyard.harness.record.Csv;
import steelyard.harness.record.FolderRefused;
import steelyard.harness.record.RunFolder;

/**
 * {@code plays.csv} read back: the figures of a forecast play by play.
 *
 * @param titles of the figures: those of expectations are {@code text: bound}, then those of the standard set
 * @param rows in order of the plays
 */
public record PlayTable(List<String> titles, List<Row> rows) {
    private static final int FIRST = PlayRows.FIRST.size();

    /**
     * A play.
     *
     * @param values by figure, durations in seconds; NaN for one without
     */
    public record Row(int play, long seed, boolean fit, double[] values) {}

    /**
     * Reads it. A last row that a kill cut short is left out.
     *
     * @throws FolderRefused when there is none that can be read; a rehearsal has none
     */
    public static PlayTable read(RunFolder folder) throws FolderRefused {
        Path file = folder.file(RunFolder.PLAYS);
        try {
            String text = Files.readString(file, StandardCharsets.UTF_8);
            List<List<String>> lines = text.substring(0, text.lastIndexOf('\n') + 1)
                    .lines()
                    .map(Csv::fields)
                    .toList();
            if (lines.isEmpty()) {
                return new PlayTable(List.of(), List.of());
            }
            List<String> head = lines.get(0);
            List<Row> rows = lines.stream()
                    .skip(1)
                    .filter(row -> row.size() == head.size())
                    .map(PlayTable::row)
                    .toList();
            return new PlayTable(head.subList(FIRST, head.size()), rows);
        } catch (IOException | IllegalArgumentException e) {
            throw new FolderRefused(file + " cannot be read; name the folder of a forecast", e);
        }
    }

    /** The values of a figure, play by play. */
    public double[] values(int figure) {
        return rows.stream().mapToDouble(row -> row.values()[figure]).toArray();
    }

    private static Row row(List<String> fields) {
        double[] values =
                fields.stream().skip(FIRST).mapToDouble(PlayTable::number).toArray();
        return new Row(
                Integer.parseInt(fields.get(0)),
                Long.parseLong(fields.get(1)),
                Boolean.parseBoolean(fields.get(2)),
                values);
    }

    /** Words say why there is no value. */
    private static double number(String field) {
        boolean word = field.isEmpty() || Character.isLetter(field.charAt(0));
        return word ? Double.NaN : Double.parseDouble(field);
    }
}
