package steelyard.backends.stub;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import steelyard.backends.behave.BehaviourSettings;
import steelyard.backends.fleet.BackendSpec;
import steelyard.backends.fleet.CannotStart;

/** Mapping files, played through a stub on a socket. */
class MappedAnswersTest {

    @TempDir
    Path folder;

    private OneStub stub(BehaviourSettings settings) throws CannotStart {
        return new OneStub(new BackendSpec("gannet", settings, "/afloat", folder));
    }

    @Test
    void answer_statusHeadersAndBody_areTheMappings() throws Exception {
        write("mappings/sailings.json", """
                {"request": {"method": "GET", "urlPath": "/sailings", "queryParameters": {"day": {"equalTo": "today"}}},
                 "response": {"status": 203, "jsonBody": {"free": 4},
                              "headers": {"Content-Type": "application/json", "X-Quay": ["north", "south"]}}}
                """);
        try (OneStub stub = stub(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            RawClient.Received answer = client.get("/sailings?day=today", 0).receive();
            assertThat(answer.status()).isEqualTo(203);
            assertThat(answer.body()).isEqualTo("{\"free\":4}");
            assertThat(answer.headers())
                    .contains("content-type: application/json", "x-quay: north", "x-quay: south", "content-length: 10")
                    .noneMatch(line -> line.startsWith("matched-stub"));
            assertThat(client.get("/sailings?day=never", 1).receive().status()).isEqualTo(404);
            assertThat(client.get("/afloat", 2).receive().status()).isEqualTo(200);
        }
    }

    @Test
    void answer_byBodyCookieAndHeader_isFound() throws Exception {
        write("hold.json", """
                {"mappings": [
                  {"request": {"method": "POST", "url": "/holds", "bodyPatterns": [{"matchesJsonPath": "$.seat"}],
                               "cookies": {"crew": {"equalTo": "yes"}}, "headers": {"X-Deck": {"equalTo": "2"}}},
                   "response": {"status": 201, "bodyFileName": "held.txt"}},
                  {"request": {"method": "ANY", "urlPattern": ".*"}, "response": {"status": 204}, "priority": 10}]}
                """);
        write("__files/held.txt", "held");
        try (OneStub stub = stub(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            String hold = "POST /holds HTTP/1.1\r\nHost: gannet\r\nCookie: crew=yes\r\nX-Deck: 2\r\nContent-Length: ";
            RawClient.Received held = client.send(hold + "12\r\n\r\n{\"seat\":\"4A\"}".replace("12", "13"))
                    .receive();
            assertThat(held.status()).isEqualTo(201);
            assertThat(held.body()).isEqualTo("held");
            assertThat(client.send(hold + "2\r\n\r\n{}").receive().status()).isEqualTo(204);
        }
    }

    @Test
    void answer_chunkedByTheMapping_comesInChunks() throws Exception {
        write("chunked.json", """
                {"request": {"url": "/"}, "response": {"body": "hello", "headers": {"Transfer-Encoding": "chunked"}}}
                """);
        try (OneStub stub = stub(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.send("GET / HTTP/1.1\r\nHost: gannet\r\nConnection: close\r\n\r\n");
            assertThat(client.readAll())
                    .containsIgnoringCase("transfer-encoding: chunked")
                    .doesNotContain("content-length")
                    .endsWith("\r\n\r\n5\r\nhello\r\n0\r\n\r\n");
        }
    }

    // The slow route takes the 3 s of its mapping beside the quick one, and its answer still comes first: it was asked
    // for first.
    @Test
    void delays_addToTheWorkAndPipelinedAnswersKeepTheirOrder() throws Exception {
        write("slow.json", """
                {"request": {"url": "/slow"}, "response": {"body": "slow", "fixedDelayMilliseconds": 1000,
                 "delayDistribution": {"type": "uniform", "lower": 2000, "upper": 2000}}}
                """);
        write("quick.json", """
                {"request": {"url": "/quick"}, "response": {"body": "quick"}}
                """);
        try (OneStub stub = stub(OneStub.NO_TIME);
                RawClient client = stub.client()) {
            client.get("/slow", 0).get("/quick", 1);
            stub.until(figures -> figures.answered() == 1 && figures.inService() == 1);
            stub.pass(Duration.ofMillis(2_999));
            assertThat(stub.figures().inService()).isEqualTo(1);
            stub.pass(Duration.ofMillis(1));
            assertThat(client.receive().body()).isEqualTo("slow");
            assertThat(client.receive().body()).isEqualTo("quick");
            assertThat(stub.figures().serviceNanos())
                    .isEqualTo(Duration.ofSeconds(3).toNanos());
        }
    }

    @ParameterizedTest
    @CsvSource(delimiter = '|', quoteCharacter = '~', textBlock = """
            {"request": {"url": "/"}, "response": {"status": 200}           | a.json:1: not JSON
            [1]                                                             | a.json: not a mapping
            {"request": {"url": "/"}}                                       | a.json: not a mapping; expected an object
            {"request": {"url": "/"}, "response": {"proxyBaseUrl": "http://x"}} | response.proxyBaseUrl is not played
            {"request": {"url": "/"}, "response": {"fault": "EMPTY_RESPONSE"}}  | use a cue of the drill instead
            {"request": {"url": "/"}, "response": {"bodyFileName": "no.txt"}}   | bodyFileName no.txt is not in
            {"request": {"url": "/"}, "response": {"fixedDelayMilliseconds": "x"}} | expected a number, but got "x"
            {"request": {"url": "/"}, "response": {"delayDistribution": {"type": "pareto"}}} | unknown distribution 'pareto'
            {"request": {"lure": "/"}, "response": {"status": 200}}         | a.json: not a mapping: Unrecognized field
            {"request": {"url": "/"}, "response": {"status": 200}, "postServeActions": [{"name": "webhook"}]} | postServeActions is not played
            """)
    void read_badFile_saysWhichAndWhy(String text, String reason) throws Exception {
        write("a.json", text);
        assertThatExceptionOfType(BadAnswers.class)
                .isThrownBy(() -> Answers.read(folder))
                .withMessageContaining("a.json")
                .withMessageContaining(reason)
                .satisfies(bad -> assertThat(bad.getMessage()).doesNotContain("\n"));
    }

    @Test
    void read_noFolderOrNothingInIt_saysSo() {
        assertThatExceptionOfType(BadAnswers.class)
                .isThrownBy(() -> Answers.read(folder))
                .withMessageContaining("no mapping in it");
        assertThatExceptionOfType(CannotStart.class)
                .isThrownBy(
                        () -> new OneStub(new BackendSpec("gannet", OneStub.NO_TIME, null, folder.resolve("missing"))))
                .withMessageContaining("missing: no such folder");
    }

    private void write(String name, String text) throws IOException {
        Path file = folder.resolve(name);
        Files.createDirectories(file.getParent());
        Files.writeString(file, text);
    }
}
