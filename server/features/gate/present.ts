import type { Gate } from "../../../shared/schemas/gate.ts";
import type { Urls } from "../builds/urls.ts";
import type { GateAnswer, GateQuestion } from "./loadGate.ts";

export function presentGate(question: Pick<GateQuestion, "lane" | "commit">, answer: GateAnswer, urls: Urls): Gate {
  const { lane, commit } = question;
  return {
    decision: answer.decision,
    lane,
    commit,
    base: answer.base,
    reasons: answer.reasons.map(({ code, severity, message, model, block, row, column, breakId }) => ({
      code,
      severity,
      message,
      ...(model === undefined ? {} : { model }),
      ...(block === undefined ? {} : { block }),
      ...(row === undefined ? {} : { row }),
      ...(column === undefined ? {} : { column }),
      ...(breakId === undefined ? {} : { breakId }),
    })),
    url: answer.buildId === null ? urls.commit(commit, lane) : urls.build(String(answer.buildId)),
  };
}
