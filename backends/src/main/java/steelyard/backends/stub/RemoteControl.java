package steelyard.backends.stub;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.net.URI;
import java.net.http.HttpClient;
import java.net.http.HttpRequest;
import java.net.http.HttpResponse;
import java.time.Duration;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.CompletionException;
import java.util.function.Function;
import steelyard.backends.behave.Change;
import steelyard.backends.behave.Figures;

/**
 * Drives a stub in another process through its {@link ControlFront}. Any thread. Whatever goes wrong on the way fails
 * the call with an {@link IOException} that says so.
 */
public final class RemoteControl implements StubControl {

    private static final Duration LONGEST_CALL = Duration.ofSeconds(10);

    private final HttpClient client = HttpClient.newBuilder()
            .version(HttpClient.Version.HTTP_1_1)
            .connectTimeout(LONGEST_CALL)
            .build();
    private final InetSocketAddress front;
    private final String token;

    public RemoteControl(InetSocketAddress front, String token) {
        this.front = front;
        this.token = token;
    }

    @Override
    public CompletableFuture<Long> apply(Change change) {
        HttpRequest request = to("/change")
                .header("Content-Type", "application/json")
                .POST(HttpRequest.BodyPublishers.ofByteArray(ControlJson.write(change)))
                .build();
        return call(
                request,
                body -> ControlJson.read(body, ControlJson.Applied.class).atNanos());
    }

    @Override
    public CompletableFuture<Figures> figures() {
        return call(to("/figures").GET().build(), ControlJson::readFigures);
    }

    private HttpRequest.Builder to(String path) {
        URI uri = URI.create("http://" + front.getHostString() + ":" + front.getPort() + path);
        return HttpRequest.newBuilder(uri).timeout(LONGEST_CALL).header("Authorization", "Bearer " + token);
    }

    private <T> CompletableFuture<T> call(HttpRequest request, Function<byte[], T> reader) {
        return client.sendAsync(request, HttpResponse.BodyHandlers.ofByteArray())
                .thenApply(answer -> {
                    if (answer.statusCode() != 200) {
                        throw new CompletionException(new IOException(problem(answer)));
                    }
                    return reader.apply(answer.body());
                });
    }

    private static String problem(HttpResponse<byte[]> answer) {
        try {
            return ControlJson.read(answer.body(), ControlJson.Problem.class).problem();
        } catch (IllegalArgumentException notOurs) {
            return "the control port answered " + answer.statusCode();
        }
    }
}
