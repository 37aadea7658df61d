export const NOTATION = "bondwright-notation";
