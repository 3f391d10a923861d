package steelyard.backends.stub;

import com.github.tomakehurst.wiremock.standalone.MappingsSource;
import com.github.tomakehurst.wiremock.stubbing.StubMapping;
import com.github.tomakehurst.wiremock.stubbing.StubMappings;
import java.util.List;

/** Keeps the engine from looking for mappings itself: they are read, checked and handed to it by {@link MappedAnswers}. */
final class NoMappings implements MappingsSource {
    @Override
    public void loadMappingsInto(StubMappings mappings) {
        // Nothing to load: see above.
    }

    @Override
    public void save(List<StubMapping> mappings) {
        throw new UnsupportedOperationException("mapping files are only read");
    }

    @Override
    public void save(StubMapping mapping) {
        throw new UnsupportedOperationException("mapping files are only read");
    }

    // The interface still demands the method that it means to drop.
    @SuppressWarnings("removal")
    @Override
    public void remove(StubMapping mapping) {
        throw new UnsupportedOperationException("mapping files are only read");
    }

    @Override
    public void removeAll() {
        throw new UnsupportedOperationException("mapping files are only read");
    }
}
