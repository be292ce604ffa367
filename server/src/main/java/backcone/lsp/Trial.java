package backcone.lsp;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.OutputStream;
import java.io.PrintStream;
import java.nio.charset.StandardCharsets;

/** A short session with itself, so that a start-up archive holds what a session needs. */
public final class Trial {
    private Trial() {}

    public static void run(String spec) {
        ByteArrayOutputStream b = new ByteArrayOutputStream();
        String uri = "untitled:trial.drive";
        String text = new com.google.gson.JsonPrimitive(spec).toString();
        String doc = "\"textDocument\":{\"uri\":\"" + uri + "\"}";
        String at = doc + ",\"position\":{\"line\":8,\"character\":6}";
        String all = doc + ",\"range\":{\"start\":{\"line\":0,\"character\":0},\"end\":{\"line\":60,\"character\":0}}";
        put(b, "{\"jsonrpc\":\"2.0\",\"id\":1,\"method\":\"initialize\",\"params\":{\"capabilities\":{}}}");
        put(b, "{\"jsonrpc\":\"2.0\",\"method\":\"initialized\",\"params\":{}}");
        put(
                b,
                "{\"jsonrpc\":\"2.0\",\"method\":\"textDocument/didOpen\",\"params\":{\"textDocument\":{\"uri\":\""
                        + uri + "\",\"languageId\":\"backcone\",\"version\":1,\"text\":" + text + "}}}");
        String[] asked = {
            "hover",
            at,
            "completion",
            at,
            "definition",
            at,
            "documentSymbol",
            doc,
            "inlayHint",
            all,
            "codeLens",
            doc,
            "semanticTokens/full",
            doc,
            "foldingRange",
            doc,
            "codeAction",
            all + ",\"context\":{\"diagnostics\":[]}",
            "documentLink",
            doc,
            "documentHighlight",
            at
        };
        for (int i = 0; i < asked.length; i += 2) {
            put(
                    b,
                    "{\"jsonrpc\":\"2.0\",\"id\":" + (i + 2) + ",\"method\":\"textDocument/" + asked[i]
                            + "\",\"params\":{" + asked[i + 1] + "}}");
        }
        put(
                b,
                "{\"jsonrpc\":\"2.0\",\"method\":\"textDocument/didChange\",\"params\":{\"textDocument\":{\"uri\":\""
                        + uri
                        + "\",\"version\":2},\"contentChanges\":[{\"range\":{\"start\":{\"line\":0,\"character\":0},\"end\":"
                        + "{\"line\":0,\"character\":0}},\"text\":\"#\"}]}}");
        OutputStream out = new ByteArrayOutputStream();
        Desk desk = ServerMain.session(
                new ByteArrayInputStream(b.toByteArray()),
                out,
                new PrintStream(OutputStream.nullOutputStream()),
                s -> {});
        desk.drain();
    }

    private static void put(ByteArrayOutputStream b, String json) {
        byte[] body = json.getBytes(StandardCharsets.UTF_8);
        b.writeBytes(("Content-Length: " + body.length + "\r\n\r\n").getBytes(StandardCharsets.US_ASCII));
        b.writeBytes(body);
    }
}
