package steelyard.harness.report;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;

/** A CSV file of the run folder (RFC 4180, one header row), by column. */
final class CsvTable {
    private final String file;
    private final Map<String, Integer> columns = new HashMap<>();
    private final List<List<String>> rows;

    private CsvTable(String file, List<List<String>> records) {
        this.file = file;
        List<String> head = records.get(0);
        for (int column = 0; column < head.size(); column++) {
            columns.put(head.get(column), column);
        }
        // The last row of a killed run may have been cut while it was written.
        rows = records.subList(1, records.size()).stream()
                .filter(row -> row.size() == head.size())
                .toList();
    }

    static CsvTable read(Path path) throws IOException {
        return parse(path.getFileName().toString(), Files.readString(path));
    }

    static CsvTable parse(String file, String text) throws IOException {
        List<List<String>> records = new Records(text).all();
        if (records.isEmpty()) {
            throw new IOException(file + ": empty, expected a header row");
        }
        return new CsvTable(file, records);
    }

    int size() {
        return rows.size();
    }

    List<String> words(String column) throws IOException {
        Integer at = columns.get(column);
        if (at == null) {
            throw new IOException(file + ": no column " + column);
        }
        return rows.stream().map(row -> row.get(at)).toList();
    }

    /** A column of numbers; an empty field is NaN. */
    double[] numbers(String column) throws IOException {
        List<String> words = words(column);
        double[] numbers = new double[words.size()];
        for (int row = 0; row < numbers.length; row++) {
            numbers[row] = number(words.get(row), column, row);
        }
        return numbers;
    }

    private double number(String word, String column, int row) throws IOException {
        if (word.isEmpty()) {
            return Double.NaN;
        }
        try {
            return Double.parseDouble(word);
        } catch (NumberFormatException e) {
            throw new IOException(file + ", row " + (row + 2) + ", " + column + ": not a number: " + word, e);
        }
    }

    /** Cuts a text into records and fields. */
    private static final class Records {
        private final String text;
        private final List<List<String>> all = new ArrayList<>();
        private final StringBuilder field = new StringBuilder();
        private List<String> record = new ArrayList<>();
        private int at;

        Records(String text) {
            this.text = text;
        }

        List<List<String>> all() {
            while (at < text.length()) {
                step(text.charAt(at++));
            }
            if (field.length() > 0 || !record.isEmpty()) {
                endRecord();
            }
            return all;
        }

        private void step(char c) {
            switch (c) {
                case '"' -> quoted();
                case ',' -> endField();
                case '\n' -> endRecord();
                case '\r' -> {}
                default -> field.append(c);
            }
        }

        private void quoted() {
            while (at < text.length()) {
                char c = text.charAt(at++);
                if (c != '"') {
                    field.append(c);
                } else if (at < text.length() && text.charAt(at) == '"') {
                    field.append('"');
                    at++;
                } else {
                    return;
                }
            }
        }

        private void endField() {
            record.add(field.toString());
            field.setLength(0);
        }

        private void endRecord() {
            endField();
            all.add(record);
            record = new ArrayList<>();
        }
    }
}
