package steelyard.harness.record;

import java.util.ArrayList;
import java.util.List;

/** Rows of comma-separated values as RFC 4180 has them; a field of this project never holds a line break. */
public final class Csv {
    private Csv() {}

    /** Adds a field, quoted where it has to be. */
    public static StringBuilder field(StringBuilder out, String text) {
        String flat = text.replace('\r', ' ').replace('\n', ' ');
        if (flat.indexOf(',') < 0 && flat.indexOf('"') < 0) {
            return out.append(flat);
        }
        return out.append('"').append(flat.replace("\"", "\"\"")).append('"');
    }

    /** The fields of one row. */
    public static List<String> fields(String row) {
        List<String> fields = new ArrayList<>();
        StringBuilder field = new StringBuilder();
        boolean quoted = false;
        for (int i = 0; i < row.length(); i++) {
            char c = row.charAt(i);
            if (c == '"' && quoted && i + 1 < row.length() && row.charAt(i + 1) == '"') {
                field.append('"');
                i++;
            } else if (c == '"') {
                quoted = !quoted;
            } else if (c == ',' && !quoted) {
                fields.add(field.toString());
                field.setLength(0);
            } else {
                field.append(c);
            }
        }
        fields.add(field.toString());
        return fields;
    }
}
