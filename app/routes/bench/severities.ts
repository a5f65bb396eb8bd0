export const severities = ["danger", "defect", "advice"] as const;

export const severityChoices = [
  { value: "danger", label: "Danger", hint: "Somebody could be hurt; it can't be signed" },
  { value: "defect", label: "Defect", hint: "Must be put right" },
  { value: "advice", label: "Advice", hint: "Worth knowing" },
];
