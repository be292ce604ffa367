package backcone.lsp;

import backcone.engine.diagnostics.Diagnostic;
import backcone.engine.text.Span;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.eclipse.lsp4j.CodeAction;
import org.eclipse.lsp4j.CodeActionKind;
import org.eclipse.lsp4j.CodeActionParams;
import org.eclipse.lsp4j.TextEdit;
import org.eclipse.lsp4j.WorkspaceEdit;

/** Fixes and refactorings at a place. */
final class Actions {
    private Actions() {}

    static List<CodeAction> of(Desk.Asked q, CodeActionParams p) {
        int from = q.lines().offset(p.getRange().getStart());
        int to = Math.max(from, q.lines().offset(p.getRange().getEnd()));
        List<CodeAction> out = new ArrayList<>();
        for (Diagnostic d : q.analysis().diagnostics()) {
            if (d.span().start() > to || d.span().end() < from) {
                continue;
            }
            for (Diagnostic.Fix f : d.fixes()) {
                out.add(action(q, f.title(), CodeActionKind.QuickFix, d, Map.of(f.span(), f.newText())));
            }
        }
        return wanted(out, p);
    }

    private static CodeAction action(Desk.Asked q, String title, String kind, Diagnostic d, Map<Span, String> edits) {
        CodeAction a = new CodeAction(title);
        a.setKind(kind);
        a.setDiagnostics(List.of(q.convert().diagnostic(d, q.lines())));
        List<TextEdit> all = new ArrayList<>();
        edits.forEach((s, t) -> all.add(new TextEdit(q.lines().range(s), t)));
        Map<String, List<TextEdit>> changes = new LinkedHashMap<>();
        changes.put(q.doc().uri, all);
        WorkspaceEdit edit = new WorkspaceEdit(changes);
        a.setEdit(edit);
        return a;
    }

    /** Only the kinds that the client asks for. */
    private static List<CodeAction> wanted(List<CodeAction> all, CodeActionParams p) {
        List<String> only = p.getContext() == null ? null : p.getContext().getOnly();
        if (only == null || only.isEmpty()) {
            return all;
        }
        List<CodeAction> out = new ArrayList<>();
        for (CodeAction a : all) {
            for (String k : only) {
                if (a.getKind().equals(k) || a.getKind().startsWith(k + ".")) {
                    out.add(a);
                    break;
                }
            }
        }
        return out;
    }
}
