package backcone.lsp;

import backcone.engine.Analysis;
import backcone.engine.editing.Calls;
import backcone.engine.editing.Completions;
import backcone.engine.editing.Hints;
import backcone.engine.editing.Hovers;
import backcone.engine.editing.Lenses;
import backcone.engine.editing.Occurrence;
import backcone.engine.editing.Outline;
import backcone.engine.editing.Paint;
import backcone.engine.editing.Scene;
import backcone.engine.editing.Signatures;
import backcone.engine.editing.Target;
import backcone.engine.parse.Colours;
import backcone.engine.parse.Formatter;
import backcone.engine.syntax.Entry;
import backcone.engine.text.FileId;
import backcone.engine.text.Span;
import com.google.gson.JsonObject;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.concurrent.CompletableFuture;
import org.eclipse.lsp4j.*;
import org.eclipse.lsp4j.jsonrpc.ResponseErrorException;
import org.eclipse.lsp4j.jsonrpc.messages.Either;
import org.eclipse.lsp4j.jsonrpc.messages.Either3;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseError;
import org.eclipse.lsp4j.jsonrpc.messages.ResponseErrorCode;
import org.eclipse.lsp4j.services.TextDocumentService;
import org.jspecify.annotations.Nullable;

/** Requests about one text. */
final class TextRequests implements TextDocumentService {
    private final Desk desk;
    private int tokensCount;

    TextRequests(Desk desk) {
        this.desk = desk;
    }

    // ---- texts

    @Override
    public void didOpen(DidOpenTextDocumentParams p) {
        TextDocumentItem t = p.getTextDocument();
        desk.open(t.getUri(), t.getVersion(), t.getText());
    }

    @Override
    public void didChange(DidChangeTextDocumentParams p) {
        Doc d = desk.doc(p.getTextDocument().getUri());
        if (d == null) {
            return;
        }
        String text = d.now.text();
        Lines lines = d.now.lines();
        int typed = -1;
        for (TextDocumentContentChangeEvent c : p.getContentChanges()) {
            String with = c.getText() == null ? "" : c.getText();
            if (c.getRange() == null) {
                text = with;
                typed = -1;
            } else {
                int a = lines.offset(c.getRange().getStart());
                int b = Math.max(a, lines.offset(c.getRange().getEnd()));
                text = new StringBuilder(text.length() - (b - a) + with.length())
                        .append(text, 0, a)
                        .append(with)
                        .append(text, b, text.length())
                        .toString();
                typed = a + with.length();
            }
            lines = new Lines(text, desk.can.utf8());
        }
        Integer version = p.getTextDocument().getVersion();
        desk.change(d, version == null ? d.now.version() + 1 : version, text, typed);
    }

    @Override
    public void didClose(DidCloseTextDocumentParams p) {
        desk.close(p.getTextDocument().getUri());
    }

    @Override
    public void didSave(DidSaveTextDocumentParams p) {
        desk.saved(p.getTextDocument().getUri());
    }

    // ---- diagnostics, when asked for

    @Override
    public CompletableFuture<DocumentDiagnosticReport> diagnostic(DocumentDiagnosticParams p) {
        return desk.<DocumentDiagnosticReport>ask(p.getTextDocument().getUri(), q -> {
                    String id = q.snapshot().version() + "." + q.doc().folder.stamp;
                    if (id.equals(p.getPreviousResultId())) {
                        return new DocumentDiagnosticReport(new RelatedUnchangedDocumentDiagnosticReport(id));
                    }
                    RelatedFullDocumentDiagnosticReport full = new RelatedFullDocumentDiagnosticReport(q.convert()
                            .diagnostics(
                                    desk.findings(q.doc(), q.analysis(), q.doc().whole()), q.lines()));
                    full.setResultId(id);
                    return new DocumentDiagnosticReport(full);
                })
                .thenApply(r -> r != null
                        ? r
                        : new DocumentDiagnosticReport(new RelatedFullDocumentDiagnosticReport(new ArrayList<>())));
    }

    // ---- hover, signature

    private static int offset(Desk.Asked q, Position p) {
        return q.lines().offset(p);
    }

    @Override
    public CompletableFuture<@Nullable Hover> hover(HoverParams p) {
        return desk.ask(p.getTextDocument().getUri(), q -> {
            Hovers.Hover h = Hovers.at(q.analysis().scene(), offset(q, p.getPosition()));
            return h == null ? null : new Hover(markup(h.markdown()), q.lines().range(h.span()));
        });
    }

    private MarkupContent markup(String markdown) {
        return desk.can.markdown()
                ? new MarkupContent(MarkupKind.MARKDOWN, markdown)
                : new MarkupContent(MarkupKind.PLAINTEXT, plain(markdown));
    }

    static String plain(String markdown) {
        return markdown.replaceAll("```\\w*\n", "")
                .replace("**", "")
                .replace("`", "")
                .replaceAll("\\\\([\\\\*_{}\\[\\]<>#|!&])", "$1")
                .replaceAll("\n{3,}", "\n\n")
                .strip();
    }

    @Override
    public CompletableFuture<@Nullable SignatureHelp> signatureHelp(SignatureHelpParams p) {
        return desk.ask(p.getTextDocument().getUri(), q -> {
            Signatures.Signature s = Signatures.at(q.analysis().scene(), offset(q, p.getPosition()));
            if (s == null) {
                return null;
            }
            List<ParameterInformation> parameters = new ArrayList<>();
            for (String x : s.parameters()) {
                parameters.add(new ParameterInformation(x));
            }
            SignatureInformation info = new SignatureInformation(s.label());
            info.setDocumentation(s.meaning());
            info.setParameters(parameters);
            return new SignatureHelp(List.of(info), 0, s.active());
        });
    }

    // ---- completion

    @Override
    public CompletableFuture<Either<List<CompletionItem>, CompletionList>> completion(CompletionParams p) {
        return desk.<Either<List<CompletionItem>, CompletionList>>ask(
                        p.getTextDocument().getUri(), q -> {
                            Scene scene = q.analysis().scene();
                            Completions.Offer offer = Completions.at(scene, offset(q, p.getPosition()));
                            Range range = q.lines().range(offer.word());
                            List<CompletionItem> out = new ArrayList<>();
                            if (offer.paths()) {
                                paths(q, range, out);
                            }
                            for (Completions.Item i : offer.items()) {
                                CompletionItem c = new CompletionItem(i.label());
                                c.setKind(kind(i.sort()));
                                c.setDetail(i.detail());
                                c.setSortText(i.order());
                                boolean snippet = i.snippet() && desk.can.snippets();
                                c.setInsertTextFormat(snippet ? InsertTextFormat.Snippet : InsertTextFormat.PlainText);
                                c.setTextEdit(Either.forLeft(new TextEdit(range, snippet ? i.insert() : i.plain())));
                                c.setFilterText(i.label());
                                JsonObject data = new JsonObject();
                                data.addProperty("uri", q.doc().uri);
                                data.addProperty("sort", i.sort().name());
                                data.addProperty("about", i.about());
                                c.setData(data);
                                out.add(c);
                            }
                            return Either.forRight(new CompletionList(false, out));
                        })
                .thenApply(r -> r != null ? r : Either.forLeft(new ArrayList<>()));
    }

    private static void paths(Desk.Asked q, Range range, List<CompletionItem> out) {
        Path here = q.doc().folder.path(q.doc().id).getParent();
        for (FileId f : q.doc().folder.files()) {
            if (f.equals(q.doc().id) || here == null) {
                continue;
            }
            String path = here.relativize(q.doc().folder.path(f)).toString().replace('\\', '/');
            CompletionItem c = new CompletionItem(path);
            c.setKind(CompletionItemKind.File);
            c.setSortText((path.startsWith("..") ? "2" : "1") + path);
            c.setTextEdit(Either.forLeft(new TextEdit(range, path)));
            out.add(c);
        }
    }

    private static CompletionItemKind kind(Completions.Sort s) {
        return switch (s) {
            case PROPERTY -> CompletionItemKind.Property;
            case BLOCK -> CompletionItemKind.Class;
            case KEYWORD -> CompletionItemKind.Keyword;
            case UNIT -> CompletionItemKind.Unit;
            case WORD -> CompletionItemKind.EnumMember;
            case REFERENCE -> CompletionItemKind.Reference;
            case METHOD -> CompletionItemKind.Method;
            case CHECK -> CompletionItemKind.Event;
            case VALUE -> CompletionItemKind.Value;
            case FUNCTION, TABLE -> CompletionItemKind.Function;
            case FILE -> CompletionItemKind.File;
        };
    }

    @Override
    public CompletableFuture<CompletionItem> resolveCompletionItem(CompletionItem c) {
        if (!(c.getData() instanceof JsonObject data) || !data.has("uri") || !data.has("sort")) {
            return CompletableFuture.completedFuture(c);
        }
        return desk.<CompletionItem>ask(data.get("uri").getAsString(), q -> {
                    Completions.Item i = new Completions.Item(
                            c.getLabel(),
                            Completions.Sort.valueOf(data.get("sort").getAsString()),
                            "",
                            "",
                            "",
                            false,
                            "",
                            data.has("about") ? data.get("about").getAsString() : "");
                    String about = Completions.about(q.analysis().scene(), i);
                    if (!about.isEmpty()) {
                        c.setDocumentation(markup(about));
                    }
                    return c;
                })
                .thenApply(r -> r == null ? c : r);
    }

    // ---- places

    private static @Nullable Occurrence at(Desk.Asked q, Position p) {
        return q.analysis().scene().occurrences().at(offset(q, p));
    }

    private CompletableFuture<Either<List<? extends Location>, List<? extends LocationLink>>> place(
            String uri, Position p, boolean handbook) {
        return desk.<Either<List<? extends Location>, List<? extends LocationLink>>>ask(uri, q -> {
                    Occurrence o = at(q, p);
                    List<Location> out = new ArrayList<>();
                    if (o != null) {
                        Target t = o.target();
                        // a word that is given here leads to its declaration; a value used here to where it is given
                        if (!handbook && t.givenIn() != null && !o.writes()) {
                            out.add(q.convert().location(t.givenIn(), t.givenAt()));
                        } else if (t.isSomewhere()) {
                            out.add(q.convert().location(t.file(), t.span()));
                        }
                    } else {
                        for (Entry e : q.analysis().syntax().entries()) {
                            if (e instanceof Entry.Use u && u.pathSpan().contains(offset(q, p))) {
                                FileId f = used(q, u);
                                if (f != null) {
                                    out.add(q.convert().location(f, Span.NONE));
                                }
                            }
                        }
                    }
                    return Either.forLeft(out);
                })
                .thenApply(r -> r != null ? r : Either.forLeft(new ArrayList<>()));
    }

    private static @Nullable FileId used(Desk.Asked q, Entry.Use u) {
        Path here = q.doc().folder.path(q.doc().id).getParent();
        if (here == null || u.path().isBlank()) {
            return null;
        }
        try {
            Path there = here.resolve(u.path()).normalize();
            return q.doc().folder.holds(there) && java.nio.file.Files.isRegularFile(there)
                    ? q.doc().folder.id(there)
                    : null;
        } catch (java.nio.file.InvalidPathException e) {
            return null;
        }
    }

    @Override
    public CompletableFuture<Either<List<? extends Location>, List<? extends LocationLink>>> definition(
            DefinitionParams p) {
        return place(p.getTextDocument().getUri(), p.getPosition(), false);
    }

    @Override
    public CompletableFuture<Either<List<? extends Location>, List<? extends LocationLink>>> declaration(
            DeclarationParams p) {
        return place(p.getTextDocument().getUri(), p.getPosition(), true);
    }

    @Override
    public CompletableFuture<Either<List<? extends Location>, List<? extends LocationLink>>> typeDefinition(
            TypeDefinitionParams p) {
        return place(p.getTextDocument().getUri(), p.getPosition(), true);
    }

    @Override
    public CompletableFuture<List<? extends Location>> references(ReferenceParams p) {
        return desk.<List<? extends Location>>ask(p.getTextDocument().getUri(), q -> {
                    Occurrence o = at(q, p.getPosition());
                    List<Location> out = new ArrayList<>();
                    if (o == null) {
                        return out;
                    }
                    boolean declaration =
                            p.getContext() == null || p.getContext().isIncludeDeclaration();
                    for (Map.Entry<FileId, List<Occurrence>> e :
                            everywhere(q, o.target()).entrySet()) {
                        for (Occurrence x : e.getValue()) {
                            if (declaration || !x.declares()) {
                                out.add(q.convert().location(e.getKey(), x.span()));
                            }
                        }
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : List.of());
    }

    /** All places of a thing: in this text, in the one that declares it and in all that use that one. */
    static Map<FileId, List<Occurrence>> everywhere(Desk.Asked q, Target t) {
        Map<FileId, List<Occurrence>> out = new LinkedHashMap<>();
        out.put(q.doc().id, q.analysis().scene().occurrences().of(t));
        if (t.sort() == Target.Sort.UNIT || t.file().isHandbook()) {
            return out;
        }
        List<FileId> files = new ArrayList<>();
        if (t.isSomewhere()) {
            files.add(t.file());
            files.addAll(q.desk().users(q.doc().folder, t.file()));
        }
        for (FileId f : files) {
            if (out.containsKey(f) || f.isHandbook()) {
                continue;
            }
            Doc open = q.doc().folder.doc(f);
            Analysis a = open != null ? open.analysis(open.now) : q.doc().folder.analyse(f);
            List<Occurrence> found = a.scene().occurrences().of(t);
            if (!found.isEmpty()) {
                out.put(f, found);
            }
        }
        return out;
    }

    @Override
    public CompletableFuture<List<? extends DocumentHighlight>> documentHighlight(DocumentHighlightParams p) {
        return desk.<List<? extends DocumentHighlight>>ask(p.getTextDocument().getUri(), q -> {
                    Occurrence o = at(q, p.getPosition());
                    List<DocumentHighlight> out = new ArrayList<>();
                    if (o != null) {
                        for (Occurrence x : q.analysis().scene().occurrences().of(o.target())) {
                            out.add(new DocumentHighlight(
                                    q.lines().range(x.span()),
                                    x.declares() || x.writes()
                                            ? DocumentHighlightKind.Write
                                            : DocumentHighlightKind.Read));
                        }
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : List.of());
    }

    // ---- rename

    @Override
    public CompletableFuture<Either3<Range, PrepareRenameResult, PrepareRenameDefaultBehavior>> prepareRename(
            PrepareRenameParams p) {
        return desk.ask(p.getTextDocument().getUri(), q -> {
            Occurrence o = at(q, p.getPosition());
            if (o == null || q.doc().id.isHandbook()) {
                return null;
            }
            if (!o.target().isNamedByAuthor()) {
                throw refused(
                        o.target().file().isHandbook()
                                ? "`" + o.target().name() + "` is a name of the handbook; it can't be renamed."
                                : "`" + o.target().name() + "` can't be renamed.");
            }
            return Either3.forSecond(new PrepareRenameResult(
                    q.lines().range(o.span()),
                    q.snapshot().text().substring(o.span().start(), o.span().end())));
        });
    }

    private static ResponseErrorException refused(String why) {
        return new ResponseErrorException(new ResponseError(ResponseErrorCode.RequestFailed, why, null));
    }

    @Override
    public CompletableFuture<@Nullable WorkspaceEdit> rename(RenameParams p) {
        return desk.ask(p.getTextDocument().getUri(), q -> {
            String name = p.getNewName() == null ? "" : p.getNewName().strip();
            if (!name.matches("[A-Za-z_\\u0391-\\u03C9][A-Za-z0-9_\\u0391-\\u03C9]*")
                    || Colours.reserved().contains(name)) {
                throw refused("`" + name + "` can't be a name: letters, digits and `_`, no digit first.");
            }
            Occurrence o = at(q, p.getPosition());
            if (o == null || !o.target().isNamedByAuthor() || q.doc().id.isHandbook()) {
                throw refused("There is nothing here that can be renamed.");
            }
            Map<FileId, List<Occurrence>> all = everywhere(q, o.target());
            WorkspaceEdit edit = new WorkspaceEdit();
            Map<String, List<TextEdit>> changes = new LinkedHashMap<>();
            List<Either<TextDocumentEdit, ResourceOperation>> versioned = new ArrayList<>();
            for (Map.Entry<FileId, List<Occurrence>> e : all.entrySet()) {
                Lines lines = e.getKey().equals(q.doc().id) ? q.lines() : desk.lines(q.doc().folder, e.getKey());
                String uri = desk.uri(q.doc().folder, e.getKey());
                List<TextEdit> edits = new ArrayList<>();
                for (Occurrence x : e.getValue()) {
                    edits.add(new TextEdit(lines.range(x.span()), name));
                }
                if (edits.isEmpty()) {
                    continue;
                }
                changes.put(uri, edits);
                Doc open = q.doc().folder.doc(e.getKey());
                List<Either<TextEdit, SnippetTextEdit>> either = new ArrayList<>();
                edits.forEach(x -> either.add(Either.forLeft(x)));
                versioned.add(Either.forLeft(new TextDocumentEdit(
                        new VersionedTextDocumentIdentifier(uri, open == null ? null : open.now.version()), either)));
            }
            if (desk.can.documentChanges()) {
                edit.setDocumentChanges(versioned);
            } else {
                edit.setChanges(changes);
            }
            return edit;
        });
    }

    // ---- structure

    @Override
    public CompletableFuture<List<Either<SymbolInformation, DocumentSymbol>>> documentSymbol(DocumentSymbolParams p) {
        return desk.<List<Either<SymbolInformation, DocumentSymbol>>>ask(
                        p.getTextDocument().getUri(), q -> {
                            List<Either<SymbolInformation, DocumentSymbol>> out = new ArrayList<>();
                            for (Outline.Symbol s : Outline.symbols(q.analysis().scene())) {
                                if (desk.can.hierarchicalSymbols()) {
                                    out.add(Either.forRight(symbol(s, q.lines())));
                                } else {
                                    flat(s, null, q, out);
                                }
                            }
                            return out;
                        })
                .thenApply(r -> r != null ? r : new ArrayList<>());
    }

    @SuppressWarnings("deprecation")
    private static void flat(
            Outline.Symbol s,
            @Nullable String around,
            Desk.Asked q,
            List<Either<SymbolInformation, DocumentSymbol>> out) {
        out.add(Either.forLeft(new SymbolInformation(
                s.name(),
                symbolKind(s.sort()),
                new Location(q.doc().uri, q.lines().range(s.span())),
                around)));
        s.inside().forEach(x -> flat(x, s.name(), q, out));
    }

    private static DocumentSymbol symbol(Outline.Symbol s, Lines lines) {
        DocumentSymbol d = new DocumentSymbol(
                s.name().isBlank() ? "?" : s.name(),
                symbolKind(s.sort()),
                lines.range(s.span()),
                lines.range(s.nameSpan()),
                s.detail());
        List<DocumentSymbol> inside = new ArrayList<>();
        s.inside().forEach(x -> inside.add(symbol(x, lines)));
        d.setChildren(inside);
        return d;
    }

    static SymbolKind symbolKind(String sort) {
        return switch (sort) {
            case "drive", "variant", "family" -> SymbolKind.Module;
            case "rate", "method" -> SymbolKind.Method;
            case "require", "accept", "check", "limit" -> SymbolKind.Event;
            case "fact", "declaration" -> SymbolKind.Property;
            case "let" -> SymbolKind.Variable;
            case "use" -> SymbolKind.File;
            case "function" -> SymbolKind.Function;
            case "table" -> SymbolKind.Array;
            case "choice" -> SymbolKind.Enum;
            case "quantity", "kind", "chapter" -> SymbolKind.Class;
            case "source" -> SymbolKind.String;
            default -> SymbolKind.Object;
        };
    }

    @Override
    public CompletableFuture<List<FoldingRange>> foldingRange(FoldingRangeRequestParams p) {
        return desk.<List<FoldingRange>>ask(p.getTextDocument().getUri(), q -> {
                    List<FoldingRange> out = new ArrayList<>();
                    for (Outline.Fold f : Outline.folds(q.analysis().scene())) {
                        int a = q.lines().line(f.span().start());
                        int b = q.lines()
                                .line(Math.min(
                                        f.span().end(), q.snapshot().text().length()));
                        if (b > a) {
                            FoldingRange r = new FoldingRange(a, f.comment() ? b : b - 1 > a ? b - 1 : b);
                            r.setKind(f.comment() ? FoldingRangeKind.Comment : FoldingRangeKind.Region);
                            out.add(r);
                        }
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : new ArrayList<>());
    }

    @Override
    public CompletableFuture<List<SelectionRange>> selectionRange(SelectionRangeParams p) {
        return desk.<List<SelectionRange>>ask(p.getTextDocument().getUri(), q -> {
                    List<SelectionRange> out = new ArrayList<>();
                    for (Position at : p.getPositions()) {
                        List<Span> spans = Outline.around(q.analysis().scene(), offset(q, at));
                        SelectionRange r = null;
                        for (int i = spans.size() - 1; i >= 0; i--) {
                            SelectionRange inner = new SelectionRange();
                            inner.setRange(q.lines().range(spans.get(i)));
                            inner.setParent(r);
                            r = inner;
                        }
                        if (r == null) {
                            r = new SelectionRange();
                            r.setRange(new Range(at, at));
                        }
                        out.add(r);
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : new ArrayList<>());
    }

    @Override
    public CompletableFuture<List<DocumentLink>> documentLink(DocumentLinkParams p) {
        return desk.<List<DocumentLink>>ask(p.getTextDocument().getUri(), q -> {
                    List<DocumentLink> out = new ArrayList<>();
                    for (Entry e : q.analysis().syntax().entries()) {
                        if (e instanceof Entry.Use u) {
                            FileId f = used(q, u);
                            if (f != null) {
                                DocumentLink l =
                                        new DocumentLink(q.lines().range(u.pathSpan()), desk.uri(q.doc().folder, f));
                                l.setTooltip("the file that is used");
                                out.add(l);
                            }
                        }
                    }
                    java.util.regex.Matcher m = java.util.regex.Pattern.compile("https?://[^\\s\"<>]+")
                            .matcher(q.snapshot().text());
                    while (m.find() && out.size() < 500) {
                        out.add(new DocumentLink(q.lines().range(m.start(), m.end()), m.group()));
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : new ArrayList<>());
    }

    // ---- colours

    @Override
    public CompletableFuture<SemanticTokens> semanticTokensFull(SemanticTokensParams p) {
        return desk.<SemanticTokens>ask(p.getTextDocument().getUri(), q -> {
                    int[] data = tokens(q, 0, q.snapshot().text().length());
                    String id = keep(q.doc(), data);
                    return new SemanticTokens(id, list(data, 0, data.length));
                })
                .thenApply(r -> r != null ? r : new SemanticTokens(new ArrayList<>()));
    }

    private synchronized String keep(Doc d, int[] data) {
        String id = Integer.toString(++tokensCount);
        d.tokens = data;
        d.tokensId = id;
        return id;
    }

    @Override
    public CompletableFuture<Either<SemanticTokens, SemanticTokensDelta>> semanticTokensFullDelta(
            SemanticTokensDeltaParams p) {
        return desk.<Either<SemanticTokens, SemanticTokensDelta>>ask(
                        p.getTextDocument().getUri(), q -> {
                            int[] old = q.doc().tokens;
                            String oldId = q.doc().tokensId;
                            int[] data = tokens(q, 0, q.snapshot().text().length());
                            String id = keep(q.doc(), data);
                            if (old == null || oldId == null || !oldId.equals(p.getPreviousResultId())) {
                                return Either.forLeft(new SemanticTokens(id, list(data, 0, data.length)));
                            }
                            int head = 0;
                            int most = Math.min(old.length, data.length);
                            while (head < most && old[head] == data[head]) {
                                head++;
                            }
                            int tail = 0;
                            while (tail < most - head && old[old.length - 1 - tail] == data[data.length - 1 - tail]) {
                                tail++;
                            }
                            List<SemanticTokensEdit> edits = new ArrayList<>();
                            if (head < old.length || head < data.length) {
                                edits.add(new SemanticTokensEdit(
                                        head, old.length - head - tail, list(data, head, data.length - tail)));
                            }
                            return Either.forRight(new SemanticTokensDelta(edits, id));
                        })
                .thenApply(r -> r != null ? r : Either.forLeft(new SemanticTokens(new ArrayList<>())));
    }

    @Override
    public CompletableFuture<SemanticTokens> semanticTokensRange(SemanticTokensRangeParams p) {
        return desk.<SemanticTokens>ask(p.getTextDocument().getUri(), q -> {
                    int[] data = tokens(
                            q,
                            offset(q, p.getRange().getStart()),
                            offset(q, p.getRange().getEnd()));
                    return new SemanticTokens(list(data, 0, data.length));
                })
                .thenApply(r -> r != null ? r : new SemanticTokens(new ArrayList<>()));
    }

    private static List<Integer> list(int[] data, int from, int to) {
        List<Integer> out = new ArrayList<>(to - from);
        for (int i = from; i < to; i++) {
            out.add(data[i]);
        }
        return out;
    }

    private static int[] tokens(Desk.Asked q, int from, int to) {
        List<Paint.Stroke> strokes = Paint.of(q.analysis().scene(), from, to);
        int[] data = new int[strokes.size() * 5];
        int n = 0;
        int lastLine = 0;
        int lastColumn = 0;
        Lines lines = q.lines();
        for (Paint.Stroke s : strokes) {
            int line = lines.line(s.start());
            int end = Math.min(s.end(), lines.end(line));
            int column = lines.column(line, s.start());
            int length = lines.column(line, end) - column;
            if (length <= 0) {
                continue;
            }
            data[n++] = line - lastLine;
            data[n++] = line == lastLine ? column - lastColumn : column;
            data[n++] = length;
            data[n++] = s.type();
            data[n++] = s.modifiers();
            lastLine = line;
            lastColumn = column;
        }
        return java.util.Arrays.copyOf(data, n);
    }

    // ---- hints and lenses

    @Override
    public CompletableFuture<List<InlayHint>> inlayHint(InlayHintParams p) {
        return desk.<List<InlayHint>>ask(p.getTextDocument().getUri(), q -> {
                    Settings s = desk.settings;
                    int from = offset(q, p.getRange().getStart());
                    int to = offset(q, p.getRange().getEnd());
                    List<InlayHint> out = new ArrayList<>();
                    Analysis before = Stale.isBroken(q.analysis()) ? q.doc().whole() : null;
                    Analysis shown = before == null ? q.analysis() : before;
                    int head = 0;
                    int tail = 0;
                    String a = shown.text();
                    String b = q.snapshot().text();
                    if (before != null) {
                        int most = Math.min(a.length(), b.length());
                        while (head < most && a.charAt(head) == b.charAt(head)) {
                            head++;
                        }
                        while (tail < most - head
                                && a.charAt(a.length() - 1 - tail) == b.charAt(b.length() - 1 - tail)) {
                            tail++;
                        }
                    }
                    int by = b.length() - a.length();
                    for (Hints.Hint h : Hints.between(
                            shown.scene(),
                            before == null ? from : 0,
                            before == null ? to : a.length(),
                            s.requirementHints(),
                            s.derivedHints())) {
                        int at = h.offset();
                        if (before != null) {
                            // of the text before this edit: those in the line that can't be read are left out
                            if (at >= head && at <= a.length() - tail && tail + head < a.length()) {
                                continue;
                            }
                            at = at < head ? at : at + by;
                            if (at < from || at > to) {
                                continue;
                            }
                        }
                        InlayHint i = new InlayHint(
                                q.lines().position(at),
                                Either.forLeft(before == null ? h.label() : "(" + h.label() + ")"));
                        i.setPaddingLeft(true);
                        JsonObject data = new JsonObject();
                        data.addProperty("uri", q.doc().uri);
                        data.addProperty("about", h.about());
                        i.setData(data);
                        out.add(i);
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : new ArrayList<>());
    }

    @Override
    public CompletableFuture<InlayHint> resolveInlayHint(InlayHint h) {
        if (!(h.getData() instanceof JsonObject data) || !data.has("uri") || !data.has("about")) {
            return CompletableFuture.completedFuture(h);
        }
        return desk.<InlayHint>ask(data.get("uri").getAsString(), q -> {
                    String text = Hints.tooltip(
                            q.analysis().scene(), data.get("about").getAsString());
                    if (!text.isEmpty()) {
                        h.setTooltip(markup(text));
                    }
                    return h;
                })
                .thenApply(r -> r == null ? h : r);
    }

    @Override
    public CompletableFuture<List<? extends CodeLens>> codeLens(CodeLensParams p) {
        return desk.<List<? extends CodeLens>>ask(p.getTextDocument().getUri(), q -> {
                    List<CodeLens> out = new ArrayList<>();
                    if (!desk.settings.lens()) {
                        return out;
                    }
                    for (Lenses.Lens l : Lenses.of(q.analysis().scene())) {
                        CodeLens c = new CodeLens(q.lines().range(l.span()));
                        if (l.material()) {
                            JsonObject data = new JsonObject();
                            data.addProperty("uri", q.doc().uri);
                            data.addProperty("offset", l.span().start());
                            c.setData(data);
                        } else {
                            Span to = l.leadsTo();
                            List<Object> arguments = new ArrayList<>();
                            if (to != null) {
                                arguments.add(q.doc().uri);
                                arguments.add(q.lines().position(to.start()));
                            }
                            c.setCommand(new Command(l.title(), to == null ? "" : "backcone.show", arguments));
                        }
                        out.add(c);
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : List.of());
    }

    @Override
    public CompletableFuture<CodeLens> resolveCodeLens(CodeLens c) {
        if (!(c.getData() instanceof JsonObject data) || !data.has("uri") || !data.has("offset")) {
            return CompletableFuture.completedFuture(c);
        }
        return desk.<CodeLens>ask(data.get("uri").getAsString(), q -> {
                    Occurrence o = q.analysis()
                            .scene()
                            .occurrences()
                            .at(data.get("offset").getAsInt());
                    int uses = 0;
                    List<Location> places = new ArrayList<>();
                    if (o != null) {
                        for (Map.Entry<FileId, List<Occurrence>> e :
                                everywhere(q, o.target()).entrySet()) {
                            for (Occurrence x : e.getValue()) {
                                if (!x.declares()) {
                                    uses++;
                                    places.add(q.convert().location(e.getKey(), x.span()));
                                }
                            }
                        }
                    }
                    List<Object> arguments = new ArrayList<>();
                    arguments.add(q.doc().uri);
                    arguments.add(c.getRange().getStart());
                    arguments.add(places);
                    c.setCommand(new Command(
                            uses == 0
                                    ? "not used in the files in reach"
                                    : "used in " + uses + (uses == 1 ? " place" : " places"),
                            uses == 0 ? "" : "backcone.places",
                            arguments));
                    return c;
                })
                .thenApply(r -> {
                    CodeLens x = r == null ? c : r;
                    if (x.getCommand() == null) {
                        x.setCommand(new Command("", ""));
                    }
                    return x;
                });
    }

    // ---- layout

    @Override
    public CompletableFuture<List<? extends TextEdit>> formatting(DocumentFormattingParams p) {
        return desk.<List<? extends TextEdit>>ask(p.getTextDocument().getUri(), q -> edits(q, 0, Integer.MAX_VALUE))
                .thenApply(r -> r != null ? r : List.of());
    }

    @Override
    public CompletableFuture<List<? extends TextEdit>> rangeFormatting(DocumentRangeFormattingParams p) {
        return desk.<List<? extends TextEdit>>ask(
                        p.getTextDocument().getUri(),
                        q -> edits(
                                q,
                                p.getRange().getStart().getLine(),
                                p.getRange().getEnd().getLine()))
                .thenApply(r -> r != null ? r : List.of());
    }

    @Override
    public CompletableFuture<List<? extends TextEdit>> onTypeFormatting(DocumentOnTypeFormattingParams p) {
        return desk.<List<? extends TextEdit>>ask(
                        p.getTextDocument().getUri(), q -> onType(q, p.getPosition(), p.getCh()))
                .thenApply(r -> r != null ? r : List.of());
    }

    /** The indentation of the line that has just begun, or of the brace that has just been typed. */
    private static List<TextEdit> onType(Desk.Asked q, Position p, String typed) {
        String text = q.snapshot().text();
        Lines lines = q.lines();
        int line = p.getLine();
        int start = lines.start(line);
        int depth = 0;
        for (Colours.Piece c : Colours.of(text)) {
            if (c.start() >= start) {
                break;
            }
            depth += c.sort() == Colours.Sort.BRACE_OPEN ? 1 : c.sort() == Colours.Sort.BRACE_CLOSE ? -1 : 0;
        }
        int end = lines.end(line);
        int i = start;
        while (i < end && (text.charAt(i) == ' ' || text.charAt(i) == '\t')) {
            i++;
        }
        if (i < end && text.charAt(i) == '}') {
            depth--;
        } else if ("}".equals(typed)) {
            return List.of(); // it closes a block on its own line
        }
        String want = "  ".repeat(Math.max(0, depth));
        return text.substring(start, i).equals(want) ? List.of() : List.of(new TextEdit(lines.range(start, i), want));
    }

    /** Edits of whole lines that bring a text into the canonical layout; none where it has syntax errors. */
    private static List<TextEdit> edits(Desk.Asked q, int fromLine, int toLine) {
        String text = q.snapshot().text();
        Formatter.Result r = Formatter.format(q.doc().id, text);
        String now = r.text();
        if (now == null || now.equals(text)) {
            return List.of();
        }
        List<String> a = split(text);
        List<String> b = split(now);
        List<TextEdit> out = new ArrayList<>();
        int i = 0;
        int j = 0;
        while (i < a.size() || j < b.size()) {
            if (i < a.size() && j < b.size() && a.get(i).equals(b.get(j))) {
                i++;
                j++;
                continue;
            }
            // the next pair of equal lines that are not empty, near by
            int di = -1;
            int dj = -1;
            search:
            for (int sum = 1; sum < 60; sum++) {
                for (int x = 0; x <= sum; x++) {
                    int y = sum - x;
                    if (i + x < a.size()
                            && j + y < b.size()
                            && !a.get(i + x).isBlank()
                            && a.get(i + x).equals(b.get(j + y))) {
                        di = x;
                        dj = y;
                        break search;
                    }
                }
            }
            if (di < 0) {
                di = a.size() - i;
                dj = b.size() - j;
                // as many lines as both have: line by line
                if (di == dj) {
                    di = 1;
                    dj = 1;
                }
            }
            if (i + di > fromLine && i <= toLine) {
                out.add(new TextEdit(
                        new Range(new Position(i, 0), at(q.lines(), i + di, text)),
                        String.join("", b.subList(j, j + dj))));
            }
            i += di;
            j += dj;
        }
        return out;
    }

    private static Position at(Lines lines, int line, String text) {
        return line < lines.count() ? new Position(line, 0) : lines.position(text.length());
    }

    /** Lines with their line ends. */
    private static List<String> split(String text) {
        List<String> out = new ArrayList<>();
        int start = 0;
        for (int i = 0; i < text.length(); i++) {
            char c = text.charAt(i);
            if (c == '\n' || (c == '\r' && (i + 1 >= text.length() || text.charAt(i + 1) != '\n'))) {
                out.add(text.substring(start, i + 1));
                start = i + 1;
            }
        }
        if (start < text.length()) {
            out.add(text.substring(start));
        }
        return out;
    }

    // ---- computed from, used in

    @Override
    public CompletableFuture<List<CallHierarchyItem>> prepareCallHierarchy(CallHierarchyPrepareParams p) {
        return desk.ask(p.getTextDocument().getUri(), q -> {
            Calls.Item i = Calls.at(q.analysis().scene(), offset(q, p.getPosition()));
            return i == null ? null : new ArrayList<>(List.of(item(q, i)));
        });
    }

    private static CallHierarchyItem item(Desk.Asked q, Calls.Item i) {
        Location whole = q.convert().location(i.file(), i.span());
        Location name = q.convert().location(i.file(), i.nameSpan());
        CallHierarchyItem c =
                new CallHierarchyItem(i.name(), SymbolKind.Property, whole.getUri(), whole.getRange(), name.getRange());
        c.setDetail(i.detail());
        JsonObject data = new JsonObject();
        data.addProperty("uri", q.doc().uri);
        data.addProperty("drive", i.drive());
        data.addProperty("name", i.name());
        c.setData(data);
        return c;
    }

    @Override
    public CompletableFuture<List<CallHierarchyIncomingCall>> callHierarchyIncomingCalls(
            CallHierarchyIncomingCallsParams p) {
        // who uses the value
        return calls(p.getItem(), true).thenApply(l -> {
            List<CallHierarchyIncomingCall> out = new ArrayList<>();
            l.forEach(x -> out.add(new CallHierarchyIncomingCall(x, new ArrayList<>(List.of(x.getSelectionRange())))));
            return out;
        });
    }

    @Override
    public CompletableFuture<List<CallHierarchyOutgoingCall>> callHierarchyOutgoingCalls(
            CallHierarchyOutgoingCallsParams p) {
        // what the value is computed from
        CallHierarchyItem from = p.getItem();
        return calls(from, false).thenApply(l -> {
            List<CallHierarchyOutgoingCall> out = new ArrayList<>();
            l.forEach(
                    x -> out.add(new CallHierarchyOutgoingCall(x, new ArrayList<>(List.of(from.getSelectionRange())))));
            return out;
        });
    }

    private CompletableFuture<List<CallHierarchyItem>> calls(CallHierarchyItem item, boolean users) {
        if (!(item.getData() instanceof JsonObject data) || !data.has("uri") || !data.has("name")) {
            return CompletableFuture.completedFuture(List.of());
        }
        return desk.<List<CallHierarchyItem>>ask(data.get("uri").getAsString(), q -> {
                    List<CallHierarchyItem> out = new ArrayList<>();
                    String drive = data.get("drive").getAsString();
                    String name = data.get("name").getAsString();
                    Scene scene = q.analysis().scene();
                    for (Calls.Item i : users ? Calls.into(scene, drive, name) : Calls.from(scene, drive, name)) {
                        out.add(item(q, i));
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : List.of());
    }

    // ---- actions

    @Override
    public CompletableFuture<List<Either<Command, CodeAction>>> codeAction(CodeActionParams p) {
        return desk.<List<Either<Command, CodeAction>>>ask(p.getTextDocument().getUri(), q -> {
                    List<Either<Command, CodeAction>> out = new ArrayList<>();
                    for (CodeAction a : Actions.of(q, p)) {
                        out.add(Either.forRight(a));
                    }
                    return out;
                })
                .thenApply(r -> r != null ? r : new ArrayList<>());
    }
}
