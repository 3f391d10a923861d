package steelyard.backends.stub;

import io.netty.handler.codec.http.FullHttpResponse;
import io.netty.handler.codec.http.HttpRequest;
import java.util.List;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import steelyard.backends.behave.Chance;
import steelyard.backends.stub.Exchange.Kind;

/** Makes what a stub answers once the work is done: plain, mapped, upgraded, or the load page. On its event loop only. */
final class AnswerMaker {

    private final @Nullable Answers answers;
    private final Chance chance;
    private final Replies replies;
    private @Nullable LoadText loadText;

    AnswerMaker(@Nullable Answers answers, Chance chance, Replies replies) {
        this.answers = answers;
        this.chance = chance;
        this.replies = replies;
    }

    /**
     * Finds the answer of a request that was read to its end.
     *
     * @return what its route adds to the work
     */
    long find(Exchange exchange, byte[] body) {
        HttpRequest head = exchange.head;
        if (answers == null || head == null) {
            return 0;
        }
        List<Map.Entry<String, String>> fields = head.headers().entries();
        String target = RequestHeads.target(head.uri());
        Answers.Answer answer = answers.find(new Answers.Asked(head.method().name(), target, fields, body));
        exchange.head = null;
        exchange.answer = answer;
        return answer.delay().nanos(chance, exchange.request, exchange.attempt);
    }

    FullHttpResponse answer(Exchange exchange, int status) {
        if (exchange.kind == Kind.PROBE) {
            return replies.shortText(status, exchange.headOnly);
        }
        if (exchange.upgrade != null) {
            return exchange.upgrade.answer(replies, exchange.headOnly);
        }
        return exchange.answer == null
                ? replies.plain(status, exchange.headOnly)
                : replies.mapped(exchange.answer, exchange.headOnly);
    }

    FullHttpResponse loadPage(Map<String, Double> gauges, boolean headOnly) {
        LoadText text = loadText == null ? loadText = new LoadText() : loadText;
        return replies.page(text.page(gauges), headOnly);
    }
}
