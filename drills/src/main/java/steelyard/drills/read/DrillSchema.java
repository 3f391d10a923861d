package steelyard.drills.read;

/**
 * The JSON Schema (draft 2020-12) of drill files, for editors. It holds for the shape of a file alone: whether a name
 * refers to something, or a window lies inside the play, only {@link DrillReader} can say.
 */
public final class DrillSchema {
    private DrillSchema() {}

    /** The schema as a JSON text. */
    public static String text() {
        return DrillLibrary.resource("drill.schema.json");
    }
}
