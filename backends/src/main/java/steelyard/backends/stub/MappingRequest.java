package steelyard.backends.stub;

import com.github.tomakehurst.wiremock.common.ListOrSingle;
import com.github.tomakehurst.wiremock.common.Urls;
import com.github.tomakehurst.wiremock.http.ContentTypeHeader;
import com.github.tomakehurst.wiremock.http.Cookie;
import com.github.tomakehurst.wiremock.http.FormParameter;
import com.github.tomakehurst.wiremock.http.HttpHeader;
import com.github.tomakehurst.wiremock.http.HttpHeaders;
import com.github.tomakehurst.wiremock.http.QueryParameter;
import com.github.tomakehurst.wiremock.http.Request;
import com.github.tomakehurst.wiremock.http.RequestMethod;
import io.netty.handler.codec.http.cookie.ServerCookieDecoder;
import java.nio.charset.StandardCharsets;
import java.util.Base64;
import java.util.Collection;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import org.jspecify.annotations.Nullable;

/** A request as the engine wants to see it. Multipart bodies are matched as one body, not part by part. */
final class MappingRequest implements Request {

    private static final String LOOPBACK = "127.0.0.1";

    private final Answers.Asked asked;
    private final HttpHeaders headers;
    private final Map<String, QueryParameter> query;

    MappingRequest(Answers.Asked asked) {
        this.asked = asked;
        this.headers = new HttpHeaders(asked.headers().stream()
                .map(field -> new HttpHeader(field.getKey(), field.getValue()))
                .toList());
        this.query = Urls.splitQueryFromUrl(asked.target());
    }

    @Override
    public String getUrl() {
        return asked.target();
    }

    @Override
    public String getAbsoluteUrl() {
        return "http://" + LOOPBACK + asked.target();
    }

    @Override
    public RequestMethod getMethod() {
        return RequestMethod.fromString(asked.method());
    }

    @Override
    public String getScheme() {
        return "http";
    }

    @Override
    public String getHost() {
        return LOOPBACK;
    }

    @Override
    public int getPort() {
        return 80;
    }

    @Override
    public String getClientIp() {
        return LOOPBACK;
    }

    @Override
    public @Nullable String getHeader(String key) {
        HttpHeader found = header(key);
        return found.isPresent() ? found.firstValue() : null;
    }

    @Override
    public HttpHeader header(String key) {
        return headers.getHeader(key);
    }

    @Override
    public ContentTypeHeader contentTypeHeader() {
        return headers.getContentTypeHeader();
    }

    @Override
    public HttpHeaders getHeaders() {
        return headers;
    }

    @Override
    public boolean containsHeader(String key) {
        return header(key).isPresent();
    }

    @Override
    public Set<String> getAllHeaderKeys() {
        return headers.keys();
    }

    @Override
    public QueryParameter queryParameter(String key) {
        QueryParameter found = query.get(key);
        return found == null ? QueryParameter.absent(key) : found;
    }

    @Override
    public FormParameter formParameter(String key) {
        FormParameter found = formParameters().get(key);
        return found == null ? FormParameter.absent(key) : found;
    }

    @Override
    public Map<String, FormParameter> formParameters() {
        String type = getHeader("Content-Type");
        if (type == null || !type.startsWith("application/x-www-form-urlencoded")) {
            return Map.of();
        }
        Map<String, FormParameter> form = new LinkedHashMap<>();
        Urls.splitQuery(getBodyAsString())
                .forEach((key, value) -> form.put(key, new FormParameter(key, value.values())));
        return form;
    }

    @Override
    public Map<String, Cookie> getCookies() {
        String field = getHeader("Cookie");
        Map<String, Cookie> cookies = new HashMap<>();
        if (field != null) {
            ServerCookieDecoder.LAX
                    .decode(field)
                    .forEach(one -> cookies.put(one.name(), new Cookie(ListOrSingle.of(one.value()))));
        }
        return cookies;
    }

    @Override
    public byte[] getBody() {
        return asked.body();
    }

    @Override
    public String getBodyAsString() {
        return new String(asked.body(), StandardCharsets.UTF_8);
    }

    @Override
    public String getBodyAsBase64() {
        return Base64.getEncoder().encodeToString(asked.body());
    }

    @Override
    public boolean isMultipart() {
        return false;
    }

    @Override
    public Collection<Part> getParts() {
        return List.of();
    }

    @Override
    public @Nullable Part getPart(String name) {
        return null;
    }

    @Override
    public boolean isBrowserProxyRequest() {
        return false;
    }

    @Override
    public Optional<Request> getOriginalRequest() {
        return Optional.empty();
    }

    @Override
    public String getProtocol() {
        return "HTTP/1.1";
    }
}
