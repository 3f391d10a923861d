package steelyard.drills.read;

import com.fasterxml.jackson.core.JsonProcessingException;
import com.fasterxml.jackson.databind.JsonNode;
import com.fasterxml.jackson.databind.ObjectMapper;
import com.networknt.schema.JsonSchema;
import com.networknt.schema.JsonSchemaFactory;
import com.networknt.schema.SpecVersion;
import java.util.List;
import org.snakeyaml.engine.v2.api.Load;
import org.snakeyaml.engine.v2.api.LoadSettings;

/** The JSON Schema at work, as an editor would use it: with YAML's own types, and without the reader. */
final class SchemaCheck {
    private static final ObjectMapper JSON = new ObjectMapper();
    private static final JsonSchema SCHEMA =
            JsonSchemaFactory.getInstance(SpecVersion.VersionFlag.V202012).getSchema(DrillSchema.text());

    private SchemaCheck() {}

    /** What the schema says against a drill; the text has to be YAML. */
    static List<String> complaints(String yaml) {
        Object plain = new Load(LoadSettings.builder().build()).loadFromString(yaml);
        JsonNode node = JSON.valueToTree(plain);
        return SCHEMA.validate(node).stream().map(Object::toString).toList();
    }

    static JsonNode schema() {
        try {
            return JSON.readTree(DrillSchema.text());
        } catch (JsonProcessingException e) {
            throw new IllegalStateException(e);
        }
    }
}
