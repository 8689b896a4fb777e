import { flushPromises } from "@vue/test-utils";
import { describe, expect, it, vi } from "vitest";
import { ApiProblem } from "../../src/api/problem.ts";
import WaiverForm from "../../src/components/break/WaiverForm.vue";
import InviteForm from "../../src/components/people/InviteForm.vue";
import TokenForm from "../../src/components/people/TokenForm.vue";
import ProjectForm from "../../src/components/project/ProjectForm.vue";
import SignInFormView from "../../src/views/SignInFormView.vue";
import { breakFixture } from "./fixtures/record.ts";
import { stripFixture } from "./fixtures/history.ts";
import { answerWith, mountAt } from "./support.ts";

const type = async (wrapper: { findAll(s: string): { setValue(v: string): Promise<void> }[] }, values: string[]) => {
  const inputs = wrapper.findAll("input:not([type=checkbox])");
  for (const [k, value] of values.entries()) await inputs[k]!.setValue(value);
};

describe("sign-in", () => {
  it("says what is missing before it asks the server", async () => {
    const sent = answerWith();
    const { wrapper } = await mountAt(SignInFormView, {}, "/sign-in");
    await type(wrapper, ["sorel", ""]);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.text()).toContain("Write your e-mail address in full.");
    expect(wrapper.text()).toContain("Write your password.");
    expect(sent).toHaveLength(0);
  });
  it("goes back to where the session ended", async () => {
    const user = { id: "1", name: "I. Sorel", email: "sorel@tidewheel.example", admin: false };
    answerWith({ body: { user, csrfToken: "t" } });
    const { wrapper, router } = await mountAt(SignInFormView, {}, "/sign-in?next=/projects/tidewheel/breaks");
    await type(wrapper, ["sorel@tidewheel.example", "correct horse battery"]);
    await wrapper.find("form").trigger("submit");
    await vi.waitFor(() => expect(router.currentRoute.value.fullPath).toBe("/projects/tidewheel/breaks"));
  });
  it("shows the server's refusal and keeps what was typed", async () => {
    answerWith({
      status: 401,
      body: { title: "Not signed in", detail: "Address and password do not belong together." },
    });
    const { wrapper } = await mountAt(SignInFormView, {}, "/sign-in");
    await type(wrapper, ["sorel@tidewheel.example", "wrong"]);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.find(".form-problem").text()).toBe("Address and password do not belong together.");
    expect((wrapper.find("input").element as HTMLInputElement).value).toBe("sorel@tidewheel.example");
  });
});

describe("a new project", () => {
  it("checks by the server's own schema", async () => {
    const send = vi.fn();
    const { wrapper } = await mountAt(ProjectForm, { send });
    await type(wrapper, ["Tide Wheel", "Turbines"]);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.text()).toContain("must be lower-case letters, digits and hyphens");
    expect(send).not.toHaveBeenCalled();
  });
  it("puts the server's word to the field that it is about", async () => {
    const taken = new ApiProblem({ status: 422, title: "No", errors: [{ pointer: "#/slug", detail: "is taken" }] });
    const { wrapper } = await mountAt(ProjectForm, { send: () => Promise.reject(taken) });
    await type(wrapper, ["tidewheel", "Turbines"]);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.find(".v-input--error").text()).toContain("is taken");
    expect(wrapper.find(".form-problem").exists()).toBe(false);
  });
});

describe("a token", () => {
  it("needs a scope and a name", async () => {
    const send = vi.fn();
    const { wrapper } = await mountAt(TokenForm, { send });
    for (const box of wrapper.findAll("input[type=checkbox]")) await box.setValue(false);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.text()).toContain("Name the job that will use it.");
    expect(send).not.toHaveBeenCalled();
    await type(wrapper, ["nightly"]);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.text()).toContain("Choose at least one.");
    await wrapper.findAll("input[type=checkbox]")[1]!.setValue(true);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(send).toHaveBeenCalledWith({ name: "nightly", scopes: ["read"] });
  });
});

describe("an invitation", () => {
  it("is sent with the role chosen, and the address leaves the form", async () => {
    const send = vi.fn(async () => {});
    const { wrapper } = await mountAt(InviteForm, { send });
    await wrapper.find("select").setValue("lead");
    await type(wrapper, ["okafor@tidewheel.example"]);
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(send).toHaveBeenCalledWith({ email: "okafor@tidewheel.example", role: "lead" });
    expect((wrapper.find("input").element as HTMLInputElement).value).toBe("");
  });
});

describe("a waiver", () => {
  it("starts from the entry, wants a reason, and bounds what is seen now", async () => {
    const send = vi.fn(async () => {});
    const record = breakFixture(stripFixture());
    const { wrapper } = await mountAt(WaiverForm, { record, entry: record.entries[0], send });
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(wrapper.text()).toContain("Say why this disagreement may stand.");
    await wrapper.find("textarea").setValue("The table is replaced next week.");
    await wrapper.find("form").trigger("submit");
    await flushPromises();
    expect(send).toHaveBeenCalledWith(
      expect.objectContaining({
        selector: { model: "rotor.thrust", output: "T1", input: "pitch", lane: "gcc-release" },
        reason: "The table is replaced next week.",
        maxError: 1,
      }),
    );
  });
});
