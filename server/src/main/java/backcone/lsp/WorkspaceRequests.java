package backcone.lsp;

import backcone.engine.editing.Hovers;
import backcone.engine.editing.Occurrence;
import backcone.engine.editing.Outline;
import backcone.engine.text.FileId;
import com.google.gson.Gson;
import com.google.gson.JsonElement;
import com.google.gson.JsonObject;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.concurrent.CompletableFuture;
import org.eclipse.lsp4j.DidChangeConfigurationParams;
import org.eclipse.lsp4j.DidChangeWatchedFilesParams;
import org.eclipse.lsp4j.DidChangeWorkspaceFoldersParams;
import org.eclipse.lsp4j.ExecuteCommandParams;
import org.eclipse.lsp4j.FileEvent;
import org.eclipse.lsp4j.Location;
import org.eclipse.lsp4j.Position;
import org.eclipse.lsp4j.ShowDocumentParams;
import org.eclipse.lsp4j.SymbolInformation;
import org.eclipse.lsp4j.WorkspaceDiagnosticParams;
import org.eclipse.lsp4j.WorkspaceDiagnosticReport;
import org.eclipse.lsp4j.WorkspaceFolder;
import org.eclipse.lsp4j.WorkspaceSymbol;
import org.eclipse.lsp4j.WorkspaceSymbolParams;
import org.eclipse.lsp4j.jsonrpc.messages.Either;
import org.eclipse.lsp4j.services.LanguageClient;
import org.eclipse.lsp4j.services.WorkspaceService;
import org.jspecify.annotations.Nullable;

/** Requests about folders, settings and commands. */
final class WorkspaceRequests implements WorkspaceService {
    static final List<String> COMMANDS =
            List.of("backcone.report", "backcone.show", "backcone.places", "backcone.status");
    private final Desk desk;
    private final Gson gson = new Gson();

    WorkspaceRequests(Desk desk) {
        this.desk = desk;
    }

    @Override
    public void didChangeConfiguration(DidChangeConfigurationParams p) {
        Settings before = desk.settings;
        desk.settings = before.with(p.getSettings());
        LanguageClient c = desk.client;
        if (c != null && !before.equals(desk.settings)) {
            if (desk.can.hintRefresh()) {
                c.refreshInlayHints();
            }
            if (desk.can.lensRefresh()) {
                c.refreshCodeLenses();
            }
        }
    }

    @Override
    public void didChangeWatchedFiles(DidChangeWatchedFilesParams p) {
        for (FileEvent e : p.getChanges()) {
            desk.changedOnDisk(e.getUri());
        }
    }

    @Override
    public void didChangeWorkspaceFolders(DidChangeWorkspaceFoldersParams p) {
        for (WorkspaceFolder f : p.getEvent().getRemoved()) {
            Path path = Uris.path(f.getUri());
            if (path != null) {
                desk.remove(path);
            }
        }
        for (WorkspaceFolder f : p.getEvent().getAdded()) {
            Path path = Uris.path(f.getUri());
            if (path != null) {
                desk.add(path);
            }
        }
    }

    @Override
    public CompletableFuture<WorkspaceDiagnosticReport> diagnostic(WorkspaceDiagnosticParams p) {
        return CompletableFuture.completedFuture(new WorkspaceDiagnosticReport(new ArrayList<>()));
    }

    @Override
    public CompletableFuture<Either<List<? extends SymbolInformation>, List<? extends WorkspaceSymbol>>> symbol(
            WorkspaceSymbolParams p) {
        return desk.<Either<List<? extends SymbolInformation>, List<? extends WorkspaceSymbol>>>soon(() -> {
                    String wanted = p.getQuery() == null ? "" : p.getQuery().toLowerCase(Locale.ROOT);
                    List<WorkspaceSymbol> out = new ArrayList<>();
                    for (Folder f : desk.folders()) {
                        for (FileId id : f.files()) {
                            if (out.size() >= 500) {
                                break;
                            }
                            Doc open = f.doc(id);
                            var scene = (open != null ? open.analysis(open.now) : f.analyse(id)).scene();
                            for (Outline.Symbol s : Outline.symbols(scene)) {
                                symbol(f, id, s, null, wanted, out, 0);
                            }
                        }
                    }
                    return Either.forRight(out);
                })
                .thenApply(r -> r != null ? r : Either.forRight(new ArrayList<>()));
    }

    private void symbol(
            Folder f,
            FileId id,
            Outline.Symbol s,
            @Nullable String around,
            String wanted,
            List<WorkspaceSymbol> out,
            int depth) {
        if (s.sort().equals("fact") || depth > 2) {
            return;
        }
        if (matches(s.name().toLowerCase(Locale.ROOT), wanted) && !s.sort().equals("use")) {
            Location at = new Location(desk.uri(f, id), desk.lines(f, id).range(s.nameSpan()));
            WorkspaceSymbol w = new WorkspaceSymbol(s.name(), TextRequests.symbolKind(s.sort()), Either.forLeft(at));
            if (around != null) {
                w.setContainerName(around);
            }
            out.add(w);
        }
        s.inside().forEach(x -> symbol(f, id, x, s.name(), wanted, out, depth + 1));
    }

    /** Whether the letters come in that order. */
    static boolean matches(String name, String letters) {
        int k = 0;
        for (int i = 0; i < name.length() && k < letters.length(); i++) {
            if (name.charAt(i) == letters.charAt(k)) {
                k++;
            }
        }
        return k == letters.length();
    }

    @Override
    public CompletableFuture<@Nullable Object> executeCommand(ExecuteCommandParams p) {
        List<Object> a = p.getArguments() == null ? List.of() : p.getArguments();
        switch (p.getCommand() == null ? "" : p.getCommand()) {
            case "backcone.report":
                return report(a);
            case "backcone.show":
                return show(a);
            case "backcone.status":
                Runtime r = Runtime.getRuntime();
                return CompletableFuture.completedFuture(
                        Map.of("documents", desk.all().size(), "memoryMB", (r.totalMemory() - r.freeMemory()) >> 20));
            default:
                return CompletableFuture.completedFuture(null);
        }
    }

    private @Nullable Position position(Object o) {
        try {
            JsonElement e = o instanceof JsonElement x ? x : gson.toJsonTree(o);
            Position at = gson.fromJson(e, Position.class);
            return at;
        } catch (RuntimeException e) {
            return null;
        }
    }

    private static String text(Object o) {
        return o instanceof JsonElement e && e.isJsonPrimitive() ? e.getAsString() : String.valueOf(o);
    }

    /** How the value or rating at a place came about, as a page. */
    private CompletableFuture<@Nullable Object> report(List<Object> a) {
        if (a.size() < 2) {
            return CompletableFuture.completedFuture(null);
        }
        Position at = position(a.get(1));
        return desk.ask(text(a.get(0)), q -> {
            if (at == null) {
                return null;
            }
            int offset = q.lines().offset(at);
            Reports.Page page = Reports.at(q.analysis(), offset);
            if (page == null) {
                Hovers.Hover h = Hovers.at(q.analysis().scene(), offset);
                Occurrence o = q.analysis().scene().occurrences().at(offset);
                if (h == null || o == null) {
                    return null;
                }
                page = new Reports.Page(o.target().name(), h.markdown());
            }
            JsonObject out = new JsonObject();
            out.addProperty("title", page.title());
            out.addProperty("markdown", page.markdown());
            return out;
        });
    }

    /** Moves the cursor of the editor to a place. */
    private CompletableFuture<@Nullable Object> show(List<Object> a) {
        LanguageClient c = desk.client;
        Position at = a.size() < 2 ? null : position(a.get(1));
        if (c != null && at != null) {
            ShowDocumentParams s = new ShowDocumentParams(text(a.get(0)));
            s.setSelection(new org.eclipse.lsp4j.Range(at, at));
            s.setTakeFocus(true);
            c.showDocument(s);
        }
        return CompletableFuture.completedFuture(null);
    }
}
