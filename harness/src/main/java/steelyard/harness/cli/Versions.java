package steelyard.harness.cli;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.util.Objects;
import java.util.Properties;
import picocli.CommandLine.IVersionProvider;

/** The version that the build wrote down. */
final class Versions implements IVersionProvider {

    /** Steelyard's own, as in the build file: {@code 0.1.0}. */
    static String steelyard() {
        Properties properties = new Properties();
        try (InputStream in = Objects.requireNonNull(Versions.class.getResourceAsStream("version.properties"))) {
            properties.load(in);
        } catch (IOException broken) {
            throw new UncheckedIOException(broken);
        }
        return Objects.requireNonNull(properties.getProperty("version"));
    }

    @Override
    public String[] getVersion() {
        String java = System.getProperty("java.vm.name") + " " + System.getProperty("java.version");
        return new String[] {"steelyard " + steelyard(), "on " + java};
    }
}
