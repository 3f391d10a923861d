package steelyard.outside;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Predicate;

/** A table of published or derived check values among the test resources. */
public final class CheckTable {
    private CheckTable() {}

    /** The rows of a CSV file with a header, each as column to text; a last column may hold commas in quotes. */
    public static List<Map<String, String>> rows(Class<?> beside, String file) {
        try (InputStream in = beside.getResourceAsStream(file)) {
            if (in == null) {
                throw new IllegalArgumentException("no check table " + file);
            }
            BufferedReader lines = new BufferedReader(new InputStreamReader(in, StandardCharsets.UTF_8));
            String[] header = lines.readLine().split(",");
            List<Map<String, String>> rows = new ArrayList<>();
            for (String line = lines.readLine(); line != null; line = lines.readLine()) {
                String[] cells = line.split(",", header.length);
                Map<String, String> row = new LinkedHashMap<>();
                for (int column = 0; column < cells.length; column++) {
                    row.put(header[column], cells[column]);
                }
                rows.add(row);
            }
            return rows;
        } catch (IOException e) {
            throw new UncheckedIOException(e);
        }
    }

    /** The one row of a table that fits. */
    public static Map<String, String> row(Class<?> beside, String file, Predicate<Map<String, String>> fits) {
        List<Map<String, String>> found =
                rows(beside, file).stream().filter(fits).toList();
        if (found.size() != 1) {
            throw new IllegalArgumentException(found.size() + " rows of " + file + " fit");
        }
        return found.get(0);
    }

    public static double number(Map<String, String> row, String column) {
        return Double.parseDouble(row.get(column));
    }
}
