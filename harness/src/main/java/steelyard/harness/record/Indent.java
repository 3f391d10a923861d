package steelyard.harness.record;

import com.fasterxml.jackson.core.util.DefaultIndenter;
import com.fasterxml.jackson.core.util.DefaultPrettyPrinter;
import com.fasterxml.jackson.core.util.Separators;

/** JSON as people write it: two spaces, a plain line feed on every system, no space before a colon. */
final class Indent extends DefaultPrettyPrinter {
    private static final long serialVersionUID = 1L;

    Indent() {
        super(Separators.createDefaultInstance().withObjectFieldValueSpacing(Separators.Spacing.AFTER));
        DefaultIndenter indenter = new DefaultIndenter("  ", "\n");
        indentObjectsWith(indenter);
        indentArraysWith(indenter);
    }

    @Override
    public DefaultPrettyPrinter createInstance() {
        return new Indent();
    }
}
