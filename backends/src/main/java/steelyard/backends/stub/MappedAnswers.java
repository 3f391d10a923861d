package steelyard.backends.stub;

import com.github.tomakehurst.wiremock.WireMockServer;
import com.github.tomakehurst.wiremock.core.Admin;
import com.github.tomakehurst.wiremock.core.WireMockConfiguration;
import com.github.tomakehurst.wiremock.direct.DirectCallHttpServer;
import com.github.tomakehurst.wiremock.direct.DirectCallHttpServerFactory;
import com.github.tomakehurst.wiremock.http.HttpHeader;
import com.github.tomakehurst.wiremock.http.Response;
import com.github.tomakehurst.wiremock.http.ResponseDefinition;
import com.github.tomakehurst.wiremock.stubbing.ServeEvent;
import com.github.tomakehurst.wiremock.verification.notmatched.NotMatchedRenderer;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import steelyard.backends.behave.RouteDelay;

/**
 * Answers from a folder of mapping files, found by the engine of a library that teams use to describe their services.
 * The engine is called directly: its own server is never started and it never sleeps.
 */
final class MappedAnswers implements Answers {

    /** Set by the engine on every answer that a mapping made. */
    private static final String ROUTE_ID = "Matched-Stub-Id";

    private final DirectCallHttpServer engine;
    private final Map<String, RouteDelay> delays;

    private MappedAnswers(DirectCallHttpServer engine, Map<String, RouteDelay> delays) {
        this.engine = engine;
        this.delays = delays;
    }

    static MappedAnswers read(Path folder) throws BadAnswers {
        List<MappingFolder.Route> routes = MappingFolder.read(folder);
        DirectCallHttpServerFactory direct = new DirectCallHttpServerFactory();
        WireMockServer server = new WireMockServer(WireMockConfiguration.wireMockConfig()
                .httpServerFactory(direct)
                .withRootDirectory(folder.toString())
                .mappingSource(new NoMappings())
                .notMatchedRendererFactory(extensions -> new NotFound())
                .extensionScanningEnabled(false)
                .disableRequestJournal());
        Map<String, RouteDelay> delays = new HashMap<>();
        for (MappingFolder.Route route : routes) {
            server.addStubMapping(route.mapping());
            delays.put(route.mapping().getId().toString(), route.delay());
        }
        return new MappedAnswers(direct.getHttpServer(), delays);
    }

    @Override
    public Answer find(Asked asked) {
        Response response = engine.stubRequest(new MappingRequest(asked));
        RouteDelay delay = RouteDelay.NOTHING;
        List<Map.Entry<String, String>> headers = new ArrayList<>();
        for (HttpHeader header : response.getHeaders().all()) {
            if (header.keyEquals(ROUTE_ID)) {
                delay = delays.getOrDefault(header.firstValue(), RouteDelay.NOTHING);
            } else {
                header.values().forEach(value -> headers.add(Map.entry(header.key(), value)));
            }
        }
        byte[] body = response.getBody();
        return new Answer(response.getStatus(), headers, body == null ? new byte[0] : body, delay);
    }

    /** The engine's own words for a request that nothing matches are long and costly to make. */
    private static final class NotFound extends NotMatchedRenderer {
        @Override
        protected ResponseDefinition render(Admin admin, ServeEvent event) {
            return new ResponseDefinition(404, "no mapping matches this request\n");
        }
    }
}
