import { withTheme, type ThemeProps } from '@rjsf/core';
import { FieldTemplate } from './templates/field-template.tsx';
import { ObjectTemplate } from './templates/object-template.tsx';
import { ChoiceWidget } from './widgets/choice-widget.tsx';
import { ChoicesWidget } from './widgets/choices-widget.tsx';
import { DateTimeWidget, DateWidget } from './widgets/date-widgets.tsx';
import { TextWidget } from './widgets/text-widget.tsx';

/** Labels, help and errors are drawn by the field template, with units and findings; the library's own stay out. */
const nothing = () => null;

const theme: ThemeProps = {
  templates: {
    FieldTemplate,
    ObjectFieldTemplate: ObjectTemplate,
    FieldErrorTemplate: nothing,
    FieldHelpTemplate: nothing,
    DescriptionFieldTemplate: nothing,
    TitleFieldTemplate: nothing,
    ErrorListTemplate: nothing,
  },
  widgets: {
    TextWidget,
    TextareaWidget: TextWidget,
    SelectWidget: ChoiceWidget,
    RadioWidget: ChoiceWidget,
    CheckboxWidget: ChoiceWidget,
    CheckboxesWidget: ChoicesWidget,
    DateWidget,
    DateTimeWidget,
  },
};

export const ThemedForm = withTheme(theme);
